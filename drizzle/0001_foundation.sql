CREATE TYPE "public"."role" AS ENUM('builder', 'crew', 'follower');--> statement-breakpoint
CREATE TYPE "public"."units" AS ENUM('inch', 'mm');--> statement-breakpoint
CREATE TYPE "public"."visibility" AS ENUM('private', 'unlisted', 'public');--> statement-breakpoint
CREATE TYPE "public"."step_status" AS ENUM('to-do', 'under-way', 'done');--> statement-breakpoint
CREATE TYPE "public"."clip_state" AS ENUM('uploading', 'waiting', 'working', 'ready', 'failed');--> statement-breakpoint
CREATE TYPE "public"."clip_task" AS ENUM('probe-clip', 'index-footage', 'make-proxy', 'read-captions');--> statement-breakpoint
CREATE TYPE "public"."recorded_at_source" AS ENUM('container', 'name', 'order', 'hand');--> statement-breakpoint
CREATE TYPE "public"."task_state" AS ENUM('waiting', 'working', 'done', 'failed');--> statement-breakpoint
CREATE TYPE "public"."inking" AS ENUM('pencilled', 'inked');--> statement-breakpoint
CREATE TYPE "public"."operation" AS ENUM('mark-out', 'cut', 'shape', 'dry-fit', 'drill', 'seal-coat', 'glue', 'fasten', 'fillet', 'laminate', 'sand-fair', 'paint', 'clean-up', 'plan-talk', 'none');--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"session_epoch" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "builds" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"address" text NOT NULL,
	"name" text NOT NULL,
	"boat" text DEFAULT '' NOT NULL,
	"about" text DEFAULT '' NOT NULL,
	"units" "units" DEFAULT 'inch' NOT NULL,
	"visibility" "visibility" DEFAULT 'private' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"build_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" "role" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_build_id_user_id_pk" PRIMARY KEY("build_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "parts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"name" text NOT NULL,
	"aliases" text[] DEFAULT '{}'::text[] NOT NULL,
	"material" text DEFAULT '' NOT NULL,
	"thickness_mm" numeric(9, 3),
	"quantity" integer,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "parts_amounts_positive" CHECK (coalesce("parts"."thickness_mm", 1) > 0 and coalesce("parts"."quantity", 1) > 0)
);
--> statement-breakpoint
CREATE TABLE "step_parts" (
	"step_id" uuid NOT NULL,
	"part_id" uuid NOT NULL,
	CONSTRAINT "step_parts_step_id_part_id_pk" PRIMARY KEY("step_id","part_id")
);
--> statement-breakpoint
CREATE TABLE "steps" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"position" integer NOT NULL,
	"stage" text DEFAULT '' NOT NULL,
	"title" text NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"materials" text[] DEFAULT '{}'::text[] NOT NULL,
	"status" "step_status" DEFAULT 'to-do' NOT NULL,
	"planned_minutes" integer,
	"spent_minutes" integer,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "steps_number_positive" CHECK ("steps"."number" > 0),
	CONSTRAINT "steps_minutes_positive" CHECK (coalesce("steps"."planned_minutes", 0) >= 0 and coalesce("steps"."spent_minutes", 0) >= 0)
);
--> statement-breakpoint
CREATE TABLE "session_steps" (
	"session_id" uuid NOT NULL,
	"step_id" uuid NOT NULL,
	CONSTRAINT "session_steps_session_id_step_id_pk" PRIMARY KEY("session_id","step_id")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"date" date NOT NULL,
	"title" text DEFAULT '' NOT NULL,
	"place" text DEFAULT '' NOT NULL,
	"temperature_c" numeric(5, 2),
	"humidity_percent" integer,
	"notes" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "sessions_humidity_range" CHECK ("sessions"."humidity_percent" between 0 and 100),
	CONSTRAINT "sessions_temperature_range" CHECK ("sessions"."temperature_c" between -60 and 70)
);
--> statement-breakpoint
CREATE TABLE "clip_tasks" (
	"clip_id" uuid NOT NULL,
	"task" "clip_task" NOT NULL,
	"state" "task_state" DEFAULT 'waiting' NOT NULL,
	"progress" real DEFAULT 0 NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"message" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "clip_tasks_clip_id_task_pk" PRIMARY KEY("clip_id","task")
);
--> statement-breakpoint
CREATE TABLE "clips" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"session_id" uuid NOT NULL,
	"build_id" uuid NOT NULL,
	"name" text NOT NULL,
	"object_key" text NOT NULL,
	"size_bytes" bigint NOT NULL,
	"content_type" text DEFAULT 'application/octet-stream' NOT NULL,
	"content_hash" text,
	"state" "clip_state" DEFAULT 'uploading' NOT NULL,
	"failure" jsonb,
	"probe" jsonb,
	"footage" jsonb,
	"duration_ms" integer,
	"recorded_at" timestamp with time zone,
	"recorded_at_source" "recorded_at_source",
	"camera" text DEFAULT '' NOT NULL,
	"offset_ms" integer DEFAULT 0 NOT NULL,
	"offset_by_hand" boolean DEFAULT false NOT NULL,
	"proxy_key" text,
	"uploaded_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "clips_duration_positive" CHECK (coalesce("clips"."duration_ms", 0) >= 0)
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"clip_id" uuid PRIMARY KEY NOT NULL,
	"upload_id" text NOT NULL,
	"part_size_bytes" integer NOT NULL,
	"fingerprint" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "caption_tracks" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"session_id" uuid NOT NULL,
	"build_id" uuid NOT NULL,
	"clip_id" uuid,
	"name" text NOT NULL,
	"language" text DEFAULT 'und' NOT NULL,
	"embedded_stream" integer,
	"object_key" text NOT NULL,
	"size_bytes" integer NOT NULL,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"failure" text,
	"read" boolean DEFAULT false NOT NULL,
	"uploaded_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "cues" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"track_id" uuid NOT NULL,
	"clip_id" uuid NOT NULL,
	"build_id" uuid NOT NULL,
	"label" text DEFAULT '' NOT NULL,
	"start_ms" integer NOT NULL,
	"end_ms" integer NOT NULL,
	"text" text NOT NULL,
	"original_text" text,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "cues_times" CHECK ("cues"."start_ms" >= 0 and "cues"."end_ms" >= "cues"."start_ms")
);
--> statement-breakpoint
CREATE TABLE "chapter_parts" (
	"chapter_id" uuid NOT NULL,
	"part_id" uuid NOT NULL,
	CONSTRAINT "chapter_parts_chapter_id_part_id_pk" PRIMARY KEY("chapter_id","part_id")
);
--> statement-breakpoint
CREATE TABLE "chapters" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"clip_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"build_id" uuid NOT NULL,
	"start_ms" integer NOT NULL,
	"end_ms" integer NOT NULL,
	"step_id" uuid,
	"operation" "operation" NOT NULL,
	"inking" "inking" NOT NULL,
	"confidence" real,
	"evidence" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_by" uuid,
	"updated_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "chapters_times" CHECK ("chapters"."start_ms" >= 0 and "chapters"."end_ms" > "chapters"."start_ms"),
	CONSTRAINT "chapters_none_has_no_step" CHECK ("chapters"."operation" <> 'none' or "chapters"."step_id" is null),
	CONSTRAINT "chapters_confidence_range" CHECK ("chapters"."confidence" between 0 and 1)
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"key" text PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" bigint
);
--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "parts" ADD CONSTRAINT "parts_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "step_parts" ADD CONSTRAINT "step_parts_step_id_steps_id_fk" FOREIGN KEY ("step_id") REFERENCES "public"."steps"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "step_parts" ADD CONSTRAINT "step_parts_part_id_parts_id_fk" FOREIGN KEY ("part_id") REFERENCES "public"."parts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "steps" ADD CONSTRAINT "steps_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session_steps" ADD CONSTRAINT "session_steps_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session_steps" ADD CONSTRAINT "session_steps_step_id_steps_id_fk" FOREIGN KEY ("step_id") REFERENCES "public"."steps"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clip_tasks" ADD CONSTRAINT "clip_tasks_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clips" ADD CONSTRAINT "clips_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clips" ADD CONSTRAINT "clips_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clips" ADD CONSTRAINT "clips_uploaded_by_users_id_fk" FOREIGN KEY ("uploaded_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caption_tracks" ADD CONSTRAINT "caption_tracks_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caption_tracks" ADD CONSTRAINT "caption_tracks_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caption_tracks" ADD CONSTRAINT "caption_tracks_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caption_tracks" ADD CONSTRAINT "caption_tracks_uploaded_by_users_id_fk" FOREIGN KEY ("uploaded_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cues" ADD CONSTRAINT "cues_track_id_caption_tracks_id_fk" FOREIGN KEY ("track_id") REFERENCES "public"."caption_tracks"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cues" ADD CONSTRAINT "cues_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cues" ADD CONSTRAINT "cues_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapter_parts" ADD CONSTRAINT "chapter_parts_chapter_id_chapters_id_fk" FOREIGN KEY ("chapter_id") REFERENCES "public"."chapters"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapter_parts" ADD CONSTRAINT "chapter_parts_part_id_parts_id_fk" FOREIGN KEY ("part_id") REFERENCES "public"."parts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_step_id_steps_id_fk" FOREIGN KEY ("step_id") REFERENCES "public"."steps"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_updated_by_users_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "users_email_unique" ON "users" USING btree (lower("email"));--> statement-breakpoint
CREATE UNIQUE INDEX "builds_address_unique" ON "builds" USING btree ("address");--> statement-breakpoint
CREATE INDEX "builds_visibility_index" ON "builds" USING btree ("visibility");--> statement-breakpoint
CREATE INDEX "memberships_user_index" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "parts_build_name_unique" ON "parts" USING btree ("build_id",lower("name"));--> statement-breakpoint
CREATE INDEX "step_parts_part_index" ON "step_parts" USING btree ("part_id");--> statement-breakpoint
CREATE UNIQUE INDEX "steps_build_number_unique" ON "steps" USING btree ("build_id","number");--> statement-breakpoint
CREATE INDEX "steps_build_position_index" ON "steps" USING btree ("build_id","position");--> statement-breakpoint
CREATE INDEX "session_steps_step_index" ON "session_steps" USING btree ("step_id");--> statement-breakpoint
CREATE INDEX "sessions_build_date_index" ON "sessions" USING btree ("build_id","date");--> statement-breakpoint
CREATE INDEX "clips_session_index" ON "clips" USING btree ("session_id","offset_ms");--> statement-breakpoint
CREATE INDEX "clips_build_index" ON "clips" USING btree ("build_id");--> statement-breakpoint
CREATE UNIQUE INDEX "clips_build_content_unique" ON "clips" USING btree ("build_id","content_hash") WHERE "clips"."content_hash" is not null;--> statement-breakpoint
CREATE INDEX "uploads_fingerprint_index" ON "uploads" USING btree ("fingerprint");--> statement-breakpoint
CREATE INDEX "caption_tracks_session_index" ON "caption_tracks" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "caption_tracks_clip_index" ON "caption_tracks" USING btree ("clip_id");--> statement-breakpoint
CREATE INDEX "cues_track_start_index" ON "cues" USING btree ("track_id","start_ms");--> statement-breakpoint
CREATE INDEX "cues_clip_start_index" ON "cues" USING btree ("clip_id","start_ms");--> statement-breakpoint
CREATE INDEX "cues_build_index" ON "cues" USING btree ("build_id");--> statement-breakpoint
CREATE INDEX "chapter_parts_part_index" ON "chapter_parts" USING btree ("part_id");--> statement-breakpoint
CREATE INDEX "chapters_session_index" ON "chapters" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "chapters_build_step_index" ON "chapters" USING btree ("build_id","step_id");--> statement-breakpoint
CREATE INDEX "chapters_clip_start_index" ON "chapters" USING btree ("clip_id","start_ms");