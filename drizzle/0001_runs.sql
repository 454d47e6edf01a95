CREATE TABLE "run_results" (
	"run_id" uuid PRIMARY KEY NOT NULL,
	"document" json NOT NULL
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"scene_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"person_id" uuid NOT NULL,
	"state" text DEFAULT 'queued' NOT NULL,
	"start_paused" boolean DEFAULT false NOT NULL,
	"memory_bytes" bigint NOT NULL,
	"queued_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"started_at" timestamp (3) with time zone,
	"ended_at" timestamp (3) with time zone,
	"grid" jsonb,
	"step" integer DEFAULT 0 NOT NULL,
	"time_ns" double precision DEFAULT 0 NOT NULL,
	"decay_db" double precision,
	"cell_steps_per_second" double precision,
	"pace_ps_per_second" double precision,
	"edits" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"message" text,
	"stop_reason" text,
	"server_id" uuid,
	"heartbeat_at" timestamp (3) with time zone,
	CONSTRAINT "runs_state_known" CHECK ("runs"."state" in ('queued', 'running', 'paused', 'done', 'stopped', 'failed', 'interrupted'))
);
--> statement-breakpoint
ALTER TABLE "run_results" ADD CONSTRAINT "run_results_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_scene_id_revision_scene_revisions_scene_id_revision_fk" FOREIGN KEY ("scene_id","revision") REFERENCES "public"."scene_revisions"("scene_id","revision") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "runs_scene_id_queued_at_index" ON "runs" USING btree ("scene_id","queued_at");--> statement-breakpoint
CREATE INDEX "runs_open" ON "runs" USING btree ("state","queued_at") WHERE "runs"."ended_at" is null;