ALTER TABLE "chapters" ADD COLUMN "inked_by" uuid;--> statement-breakpoint
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_inked_by_users_id_fk" FOREIGN KEY ("inked_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
-- Of what stands already: the last hand on it.
UPDATE "chapters" SET "inked_by" = coalesce("updated_by", "created_by") WHERE "inking" = 'inked';
