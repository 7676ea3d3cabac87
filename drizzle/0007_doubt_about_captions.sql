ALTER TABLE "caption_tracks" ADD COLUMN "doubt" text;--> statement-breakpoint
ALTER TABLE "caption_tracks" ADD COLUMN "kept" boolean DEFAULT false NOT NULL;