CREATE TABLE "conformance_report" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"version_id" uuid NOT NULL,
	"driver_hash" text NOT NULL,
	"green" boolean NOT NULL,
	"report" jsonb NOT NULL,
	"author_id" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "conformance_report_proof_key" UNIQUE("id","version_id","driver_hash","green"),
	CONSTRAINT "conformance_report_hash_form" CHECK ("conformance_report"."driver_hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "driver" (
	"slug" text PRIMARY KEY NOT NULL,
	"maker" text NOT NULL,
	"model" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "driver_slug_form" CHECK ("driver"."slug" ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length("driver"."slug") <= 64)
);
--> statement-breakpoint
CREATE TABLE "driver_version" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slug" text NOT NULL,
	"version" text NOT NULL,
	"version_order" integer[] NOT NULL,
	"state" text DEFAULT 'draft' NOT NULL,
	"came_from" text,
	"origin" text DEFAULT 'written' NOT NULL,
	"definition" jsonb NOT NULL,
	"hash" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"author_id" uuid,
	"report_id" uuid,
	"report_green" boolean,
	"revision" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"published_at" timestamp with time zone,
	"withdrawn_at" timestamp with time zone,
	"withdrawn_reason" text,
	CONSTRAINT "driver_version_form" CHECK ("driver_version"."version" ~ '^\d{1,4}\.\d{1,4}\.\d{1,4}$'),
	CONSTRAINT "driver_version_hash_form" CHECK ("driver_version"."hash" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "driver_version_state_known" CHECK ("driver_version"."state" in ('draft', 'conformance', 'published', 'withdrawn')),
	CONSTRAINT "driver_version_transition_allowed" CHECK (("driver_version"."came_from" is null and "driver_version"."state" = case "driver_version"."origin" when 'shipped' then 'published' else 'draft' end)
        or coalesce("driver_version"."came_from", '') || '>' || "driver_version"."state" in ('draft>conformance', 'conformance>draft', 'conformance>published', 'published>withdrawn')),
	CONSTRAINT "driver_version_published_with_report" CHECK ("driver_version"."state" not in ('published', 'withdrawn') or "driver_version"."origin" = 'shipped'
        or ("driver_version"."report_id" is not null and "driver_version"."report_green" is true)),
	CONSTRAINT "driver_version_report_whole" CHECK (("driver_version"."report_id" is null) = ("driver_version"."report_green" is null)),
	CONSTRAINT "driver_version_published_at" CHECK (("driver_version"."published_at" is not null) = ("driver_version"."state" in ('published', 'withdrawn'))),
	CONSTRAINT "driver_version_withdrawn_whole" CHECK (("driver_version"."state" = 'withdrawn') = ("driver_version"."withdrawn_at" is not null) and ("driver_version"."withdrawn_at" is null) = ("driver_version"."withdrawn_reason" is null))
);
--> statement-breakpoint
CREATE TABLE "driver_question" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"driver_slug" text NOT NULL,
	"asker_id" uuid NOT NULL,
	"text" text NOT NULL,
	"recording_id" uuid,
	"answer" text,
	"answered_by_id" uuid,
	"answered_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "driver_question_text_length" CHECK (length("driver_question"."text") between 1 and 4000),
	CONSTRAINT "driver_question_answer_whole" CHECK (("driver_question"."answer" is null) = ("driver_question"."answered_at" is null))
);
--> statement-breakpoint
CREATE TABLE "recording" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"device_id" uuid,
	"name" text NOT NULL,
	"driver_slug" text NOT NULL,
	"driver_version" text NOT NULL,
	"started_at" timestamp with time zone,
	"struck_out" boolean NOT NULL,
	"exchanges" integer NOT NULL,
	"lines" integer NOT NULL,
	"content" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp with time zone,
	CONSTRAINT "recording_name_length" CHECK (length("recording"."name") between 1 and 120),
	CONSTRAINT "recording_content_length" CHECK (octet_length("recording"."content") <= 16777216)
);
--> statement-breakpoint
ALTER TABLE "device" ADD COLUMN "acknowledged_driver_version" text;--> statement-breakpoint
ALTER TABLE "conformance_report" ADD CONSTRAINT "conformance_report_version_id_driver_version_id_fk" FOREIGN KEY ("version_id") REFERENCES "public"."driver_version"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "conformance_report" ADD CONSTRAINT "conformance_report_author_id_user_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_version" ADD CONSTRAINT "driver_version_slug_driver_slug_fk" FOREIGN KEY ("slug") REFERENCES "public"."driver"("slug") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_version" ADD CONSTRAINT "driver_version_author_id_user_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_question" ADD CONSTRAINT "driver_question_driver_slug_driver_slug_fk" FOREIGN KEY ("driver_slug") REFERENCES "public"."driver"("slug") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_question" ADD CONSTRAINT "driver_question_asker_id_user_id_fk" FOREIGN KEY ("asker_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_question" ADD CONSTRAINT "driver_question_recording_id_recording_id_fk" FOREIGN KEY ("recording_id") REFERENCES "public"."recording"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "driver_question" ADD CONSTRAINT "driver_question_answered_by_id_user_id_fk" FOREIGN KEY ("answered_by_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recording" ADD CONSTRAINT "recording_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recording" ADD CONSTRAINT "recording_device_fk" FOREIGN KEY ("owner_id","device_id") REFERENCES "public"."device"("owner_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "conformance_report_version_idx" ON "conformance_report" USING btree ("version_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "driver_name_idx" ON "driver" USING btree ("maker","model","slug");--> statement-breakpoint
CREATE UNIQUE INDEX "driver_version_key" ON "driver_version" USING btree ("slug","version");--> statement-breakpoint
CREATE INDEX "driver_version_order_idx" ON "driver_version" USING btree ("slug","version_order" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "driver_version_report_idx" ON "driver_version" USING btree ("report_id");--> statement-breakpoint
CREATE INDEX "driver_question_driver_idx" ON "driver_question" USING btree ("driver_slug","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "driver_question_asker_idx" ON "driver_question" USING btree ("asker_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "driver_question_recording_idx" ON "driver_question" USING btree ("recording_id");--> statement-breakpoint
CREATE INDEX "recording_owner_idx" ON "recording" USING btree ("owner_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST) WHERE deleted_at is null;--> statement-breakpoint
CREATE INDEX "recording_created_idx" ON "recording" USING btree ("created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST) WHERE deleted_at is null;