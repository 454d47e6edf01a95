DROP INDEX "media_workspace_id_index";--> statement-breakpoint
CREATE UNIQUE INDEX "media_medium_id" ON "media" USING btree ("workspace_id",("medium"->>'id'));