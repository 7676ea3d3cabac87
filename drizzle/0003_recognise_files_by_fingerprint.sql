DROP INDEX "uploads_fingerprint_index";--> statement-breakpoint
ALTER TABLE "clips" ADD COLUMN "fingerprint" text;--> statement-breakpoint
CREATE INDEX "clips_fingerprint_index" ON "clips" USING btree ("build_id","fingerprint");--> statement-breakpoint
CREATE UNIQUE INDEX "clips_uploading_unique" ON "clips" USING btree ("build_id","fingerprint") WHERE "clips"."state" = 'uploading';--> statement-breakpoint
ALTER TABLE "uploads" DROP COLUMN "fingerprint";