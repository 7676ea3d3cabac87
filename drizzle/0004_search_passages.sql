CREATE TABLE "passages" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"clip_id" uuid NOT NULL,
	"track_id" uuid,
	"chapter_id" uuid,
	"start_ms" integer NOT NULL,
	"end_ms" integer NOT NULL,
	"starts" integer[] DEFAULT '{}'::integer[] NOT NULL,
	"lines" text[] DEFAULT '{}'::text[] NOT NULL,
	"lexemes" "tsvector" NOT NULL
);
--> statement-breakpoint
CREATE TABLE "search_words" (
	"build_id" uuid NOT NULL,
	"stem" text NOT NULL,
	"word" text NOT NULL,
	"passages" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "search_words_build_id_stem_pk" PRIMARY KEY("build_id","stem")
);
--> statement-breakpoint
ALTER TABLE "passages" ADD CONSTRAINT "passages_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "passages" ADD CONSTRAINT "passages_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "passages" ADD CONSTRAINT "passages_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "passages" ADD CONSTRAINT "passages_track_id_caption_tracks_id_fk" FOREIGN KEY ("track_id") REFERENCES "public"."caption_tracks"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "passages" ADD CONSTRAINT "passages_chapter_id_chapters_id_fk" FOREIGN KEY ("chapter_id") REFERENCES "public"."chapters"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "search_words" ADD CONSTRAINT "search_words_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "passages_lexemes_index" ON "passages" USING gin ("lexemes") WITH (fastupdate=true,gin_pending_list_limit=256);--> statement-breakpoint
CREATE INDEX "passages_clip_index" ON "passages" USING btree ("clip_id");--> statement-breakpoint
CREATE INDEX "passages_chapter_index" ON "passages" USING btree ("chapter_id");--> statement-breakpoint
CREATE INDEX "passages_track_index" ON "passages" USING btree ("track_id");--> statement-breakpoint
CREATE INDEX "passages_session_index" ON "passages" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "passages_build_index" ON "passages" USING btree ("build_id");--> statement-breakpoint
CREATE INDEX "search_words_stem_index" ON "search_words" USING btree ("stem");--> statement-breakpoint
CREATE INDEX "search_words_trigram_index" ON "search_words" USING gin ("stem" gin_trgm_ops);