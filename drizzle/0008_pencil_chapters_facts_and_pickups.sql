CREATE TYPE "public"."fact_kind" AS ENUM('length', 'angle', 'thickness', 'ratio', 'time', 'count', 'temperature', 'adhesive', 'fastener');--> statement-breakpoint
CREATE TYPE "public"."fact_unit" AS ENUM('mm', 'deg', 'min', 'count', 'C', 'ratio');--> statement-breakpoint
CREATE TYPE "public"."pickup_state" AS ENUM('open', 'done', 'dismissed');--> statement-breakpoint
CREATE TABLE "dismissals" (
	"chapter_id" uuid PRIMARY KEY NOT NULL,
	"clip_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"start_ms" integer NOT NULL,
	"end_ms" integer NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "facts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"clip_id" uuid NOT NULL,
	"step_id" uuid,
	"at_ms" integer NOT NULL,
	"kind" "fact_kind" NOT NULL,
	"said" text NOT NULL,
	"value" double precision,
	"unit" "fact_unit",
	"dismissed" boolean DEFAULT false NOT NULL,
	"inking" "inking" DEFAULT 'pencilled' NOT NULL,
	"proposed" boolean DEFAULT false NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_by" uuid,
	"inked_by" uuid,
	"updated_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "facts_at" CHECK ("facts"."at_ms" >= 0)
);
--> statement-breakpoint
CREATE TABLE "pencillings" (
	"session_id" uuid PRIMARY KEY NOT NULL,
	"state" "task_state" DEFAULT 'waiting' NOT NULL,
	"message" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "pickups" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"build_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"clip_id" uuid NOT NULL,
	"step_id" uuid,
	"at_ms" integer NOT NULL,
	"words" text NOT NULL,
	"state" "pickup_state" DEFAULT 'open' NOT NULL,
	"inking" "inking" DEFAULT 'pencilled' NOT NULL,
	"proposed" boolean DEFAULT false NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_by" uuid,
	"inked_by" uuid,
	"updated_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "pickups_at" CHECK ("pickups"."at_ms" >= 0)
);
--> statement-breakpoint
ALTER TABLE "chapters" ADD COLUMN "alternatives" jsonb DEFAULT '{"steps":[],"operations":[]}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "chapters" ADD COLUMN "proposed" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "dismissals" ADD CONSTRAINT "dismissals_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "dismissals" ADD CONSTRAINT "dismissals_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "dismissals" ADD CONSTRAINT "dismissals_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_step_id_steps_id_fk" FOREIGN KEY ("step_id") REFERENCES "public"."steps"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_inked_by_users_id_fk" FOREIGN KEY ("inked_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "facts" ADD CONSTRAINT "facts_updated_by_users_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pencillings" ADD CONSTRAINT "pencillings_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_build_id_builds_id_fk" FOREIGN KEY ("build_id") REFERENCES "public"."builds"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_session_id_sessions_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_clip_id_clips_id_fk" FOREIGN KEY ("clip_id") REFERENCES "public"."clips"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_step_id_steps_id_fk" FOREIGN KEY ("step_id") REFERENCES "public"."steps"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_inked_by_users_id_fk" FOREIGN KEY ("inked_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pickups" ADD CONSTRAINT "pickups_updated_by_users_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "dismissals_session_index" ON "dismissals" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "dismissals_clip_index" ON "dismissals" USING btree ("clip_id");--> statement-breakpoint
CREATE INDEX "facts_session_index" ON "facts" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "facts_step_index" ON "facts" USING btree ("step_id");--> statement-breakpoint
CREATE INDEX "facts_clip_index" ON "facts" USING btree ("clip_id","at_ms");--> statement-breakpoint
CREATE INDEX "facts_build_index" ON "facts" USING btree ("build_id");--> statement-breakpoint
CREATE INDEX "pickups_session_index" ON "pickups" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "pickups_build_index" ON "pickups" USING btree ("build_id","state");--> statement-breakpoint
CREATE INDEX "pickups_clip_index" ON "pickups" USING btree ("clip_id","at_ms");--> statement-breakpoint
CREATE INDEX "pickups_step_index" ON "pickups" USING btree ("step_id");--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_proposed_is_pencilled" CHECK (not "chapters"."proposed" or "chapters"."inking" = 'pencilled');