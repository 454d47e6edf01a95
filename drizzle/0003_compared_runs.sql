ALTER TABLE "runs" ADD COLUMN "two_mesh" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "runs" ADD COLUMN "shielding" boolean DEFAULT false NOT NULL;