CREATE TABLE "audit" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor_id" uuid,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"detail" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "backup" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"content_hash" text NOT NULL,
	"name" text NOT NULL,
	"cause" text NOT NULL,
	"firmware" text NOT NULL,
	"active_slot" integer NOT NULL,
	"arriving" jsonb,
	"raster_out" jsonb,
	"taken_at" timestamp with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp with time zone,
	CONSTRAINT "backup_device_key" UNIQUE("owner_id","device_id","id"),
	CONSTRAINT "backup_name_length" CHECK (length("backup"."name") between 1 and 120),
	CONSTRAINT "backup_cause_known" CHECK ("backup"."cause" in ('by-hand', 'before-run', 'after-run'))
);
--> statement-breakpoint
CREATE TABLE "backup_content" (
	"owner_id" uuid NOT NULL,
	"hash" text NOT NULL,
	"driver_slug" text NOT NULL,
	"driver_version" text NOT NULL,
	"values" jsonb NOT NULL,
	"unreadable" jsonb NOT NULL,
	"document" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "backup_content_owner_id_hash_pk" PRIMARY KEY("owner_id","hash"),
	CONSTRAINT "backup_content_hash_form" CHECK ("backup_content"."hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "device" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"name" text NOT NULL,
	"driver_slug" text NOT NULL,
	"driver_version" text NOT NULL,
	"maker" text NOT NULL,
	"model" text NOT NULL,
	"serial_number" text,
	"firmware" text NOT NULL,
	"simulated" boolean NOT NULL,
	"screen_id" uuid,
	"known_good_backup_id" uuid,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp with time zone,
	CONSTRAINT "device_owner_key" UNIQUE("owner_id","id"),
	CONSTRAINT "device_name_length" CHECK (length("device"."name") between 1 and 80)
);
--> statement-breakpoint
CREATE TABLE "idempotency_key" (
	"caller" text NOT NULL,
	"key" text NOT NULL,
	"request_hash" text NOT NULL,
	"status" integer,
	"headers" jsonb,
	"body" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_key_caller_key_pk" PRIMARY KEY("caller","key")
);
--> statement-breakpoint
CREATE TABLE "plan" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"backup_id" uuid NOT NULL,
	"target_kind" text NOT NULL,
	"target_revision_id" uuid,
	"target_backup_id" uuid,
	"target_document" jsonb,
	"left_out" jsonb NOT NULL,
	"screen" jsonb,
	"screen_id" uuid,
	"accepted_unknown" boolean NOT NULL,
	"acknowledged" jsonb NOT NULL,
	"active_slot" integer NOT NULL,
	"driver_slug" text NOT NULL,
	"driver_version" text NOT NULL,
	"hash" text NOT NULL,
	"checked" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "plan_device_key" UNIQUE("owner_id","device_id","id"),
	CONSTRAINT "plan_screen_or_accepted" CHECK (("plan"."screen" is null) = "plan"."accepted_unknown"),
	CONSTRAINT "plan_target_whole" CHECK (("plan"."target_kind" = 'revision') = ("plan"."target_revision_id" is not null)
        and ("plan"."target_kind" = 'restore') = ("plan"."target_backup_id" is not null)
        and ("plan"."target_kind" = 'restore') = ("plan"."target_document" is null)),
	CONSTRAINT "plan_target_kind_known" CHECK ("plan"."target_kind" in ('revision', 'restore', 'document')),
	CONSTRAINT "plan_hash_form" CHECK ("plan"."hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "profile" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"visibility" text DEFAULT 'private' NOT NULL,
	"title" text NOT NULL,
	"summary" text DEFAULT '' NOT NULL,
	"current_revision" integer NOT NULL,
	"line_rate_min_hz" double precision,
	"line_rate_max_hz" double precision,
	"driver_slug" text,
	"search" "tsvector" GENERATED ALWAYS AS (to_tsvector('simple', title || ' ' || summary)) STORED NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp with time zone,
	CONSTRAINT "profile_visibility_known" CHECK ("profile"."visibility" in ('private', 'shared')),
	CONSTRAINT "profile_title_length" CHECK (length("profile"."title") between 1 and 120),
	CONSTRAINT "profile_line_rates_ordered" CHECK ("profile"."line_rate_min_hz" <= "profile"."line_rate_max_hz")
);
--> statement-breakpoint
CREATE TABLE "revision" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"profile_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"author_id" uuid,
	"parent_id" uuid,
	"document" jsonb NOT NULL,
	"document_hash" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "revision_number_key" UNIQUE("profile_id","number"),
	CONSTRAINT "revision_number_from_one" CHECK ("revision"."number" >= 1),
	CONSTRAINT "revision_hash_form" CHECK ("revision"."document_hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "rate_limit" (
	"key" text PRIMARY KEY NOT NULL,
	"refilled_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "run" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"plan_id" uuid NOT NULL,
	"state" text DEFAULT 'ready' NOT NULL,
	"came_from" text,
	"countdown_seconds" integer NOT NULL,
	"holder" text NOT NULL,
	"holder_seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_word" text,
	"keep_taken" boolean DEFAULT false NOT NULL,
	"after_backup_id" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "run_state_known" CHECK ("run"."state" in ('ready', 'writing', 'trying', 'keeping', 'kept', 'called-off', 'putting-back', 'put-back', 'unconfirmed', 'mixed', 'left')),
	CONSTRAINT "run_transition_allowed" CHECK (("run"."came_from" is null and "run"."state" = 'ready') or coalesce("run"."came_from", '') || '>' || "run"."state" in ('ready>writing', 'ready>called-off', 'writing>trying', 'writing>keeping', 'writing>kept', 'writing>putting-back', 'writing>put-back', 'writing>unconfirmed', 'writing>mixed', 'trying>keeping', 'trying>putting-back', 'trying>put-back', 'trying>unconfirmed', 'trying>mixed', 'keeping>trying', 'keeping>kept', 'keeping>putting-back', 'keeping>put-back', 'keeping>unconfirmed', 'keeping>mixed', 'putting-back>trying', 'putting-back>kept', 'putting-back>put-back', 'putting-back>unconfirmed', 'putting-back>mixed', 'unconfirmed>writing', 'unconfirmed>trying', 'unconfirmed>putting-back', 'unconfirmed>kept', 'unconfirmed>put-back', 'unconfirmed>mixed', 'unconfirmed>left', 'mixed>writing', 'mixed>trying', 'mixed>putting-back', 'mixed>kept', 'mixed>put-back', 'mixed>unconfirmed', 'mixed>left')),
	CONSTRAINT "run_end_stated" CHECK (("run"."ended_at" is not null) = ("run"."state" in ('kept', 'called-off', 'put-back', 'left'))),
	CONSTRAINT "run_countdown_bounds" CHECK ("run"."countdown_seconds" between 10 and 120),
	CONSTRAINT "run_word_known" CHECK ("run"."last_word" in ('keep', 'back'))
);
--> statement-breakpoint
CREATE TABLE "run_step" (
	"run_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"at_ms" double precision NOT NULL,
	"kind" text NOT NULL,
	"direction" text,
	"request" text,
	"outcome" text,
	"entry" jsonb NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "run_step_run_id_number_pk" PRIMARY KEY("run_id","number"),
	CONSTRAINT "run_step_number" CHECK ("run_step"."number" >= 0),
	CONSTRAINT "run_step_kind_known" CHECK ("run_step"."kind" in ('request', 'state', 'word', 'boot-count', 'stated-cycle')),
	CONSTRAINT "run_step_request_whole" CHECK (("run_step"."kind" = 'request') = ("run_step"."direction" is not null and "run_step"."request" is not null and "run_step"."outcome" is not null)),
	CONSTRAINT "run_step_outcome_known" CHECK ("run_step"."outcome" in ('leaving', 'done', 'refused', 'unknown', 'mismatch'))
);
--> statement-breakpoint
CREATE TABLE "screen" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"name" text NOT NULL,
	"envelope" jsonb NOT NULL,
	"preset_id" text,
	"notes" text DEFAULT '' NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp with time zone,
	CONSTRAINT "screen_owner_key" UNIQUE("owner_id","id"),
	CONSTRAINT "screen_name_length" CHECK (length("screen"."name") between 1 and 80)
);
--> statement-breakpoint
CREATE TABLE "account" (
	"user_id" uuid NOT NULL,
	"type" text NOT NULL,
	"provider" text NOT NULL,
	"provider_account_id" text NOT NULL,
	"refresh_token" text,
	"access_token" text,
	"expires_at" integer,
	"token_type" text,
	"scope" text,
	"id_token" text,
	"session_state" text,
	CONSTRAINT "account_provider_provider_account_id_pk" PRIMARY KEY("provider","provider_account_id")
);
--> statement-breakpoint
CREATE TABLE "session" (
	"session_token" text PRIMARY KEY NOT NULL,
	"id" uuid DEFAULT gen_random_uuid() NOT NULL,
	"user_id" uuid NOT NULL,
	"expires" timestamp with time zone NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"user_agent" text
);
--> statement-breakpoint
CREATE TABLE "verification" (
	"identifier" text NOT NULL,
	"token" text NOT NULL,
	"expires" timestamp with time zone NOT NULL,
	CONSTRAINT "verification_identifier_token_pk" PRIMARY KEY("identifier","token")
);
--> statement-breakpoint
CREATE TABLE "credential" (
	"user_id" uuid PRIMARY KEY NOT NULL,
	"password_hash" text NOT NULL,
	"changed_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "user" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"email_verified" timestamp with time zone,
	"image" text,
	"role" text DEFAULT 'owner' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "user_email_lower_case" CHECK ("user"."email" = lower("user"."email")),
	CONSTRAINT "user_role_known" CHECK ("user"."role" in ('owner', 'maintainer', 'admin')),
	CONSTRAINT "user_name_length" CHECK (length("user"."name") between 1 and 80)
);
--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_actor_id_user_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "backup" ADD CONSTRAINT "backup_device_fk" FOREIGN KEY ("owner_id","device_id") REFERENCES "public"."device"("owner_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "backup" ADD CONSTRAINT "backup_content_fk" FOREIGN KEY ("owner_id","content_hash") REFERENCES "public"."backup_content"("owner_id","hash") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "backup_content" ADD CONSTRAINT "backup_content_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device" ADD CONSTRAINT "device_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device" ADD CONSTRAINT "device_screen_fk" FOREIGN KEY ("owner_id","screen_id") REFERENCES "public"."screen"("owner_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plan" ADD CONSTRAINT "plan_target_revision_id_revision_id_fk" FOREIGN KEY ("target_revision_id") REFERENCES "public"."revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plan" ADD CONSTRAINT "plan_backup_fk" FOREIGN KEY ("owner_id","device_id","backup_id") REFERENCES "public"."backup"("owner_id","device_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plan" ADD CONSTRAINT "plan_target_backup_fk" FOREIGN KEY ("target_backup_id") REFERENCES "public"."backup"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "profile" ADD CONSTRAINT "profile_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision" ADD CONSTRAINT "revision_profile_id_profile_id_fk" FOREIGN KEY ("profile_id") REFERENCES "public"."profile"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision" ADD CONSTRAINT "revision_author_id_user_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revision" ADD CONSTRAINT "revision_parent_id_revision_id_fk" FOREIGN KEY ("parent_id") REFERENCES "public"."revision"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run" ADD CONSTRAINT "run_after_backup_id_backup_id_fk" FOREIGN KEY ("after_backup_id") REFERENCES "public"."backup"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run" ADD CONSTRAINT "run_plan_fk" FOREIGN KEY ("owner_id","device_id","plan_id") REFERENCES "public"."plan"("owner_id","device_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_step" ADD CONSTRAINT "run_step_run_id_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."run"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "screen" ADD CONSTRAINT "screen_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "account" ADD CONSTRAINT "account_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "credential" ADD CONSTRAINT "credential_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_at_idx" ON "audit" USING btree ("at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "audit_actor_idx" ON "audit" USING btree ("actor_id","id");--> statement-breakpoint
CREATE INDEX "audit_subject_idx" ON "audit" USING btree ("subject","id");--> statement-breakpoint
CREATE INDEX "backup_device_taken_idx" ON "backup" USING btree ("device_id","taken_at" DESC NULLS FIRST,"id" DESC NULLS FIRST) WHERE deleted_at is null;--> statement-breakpoint
CREATE INDEX "backup_content_idx" ON "backup" USING btree ("owner_id","content_hash");--> statement-breakpoint
CREATE INDEX "device_owner_idx" ON "device" USING btree ("owner_id","name","id") WHERE deleted_at is null;--> statement-breakpoint
CREATE UNIQUE INDEX "device_identity_idx" ON "device" USING btree ("owner_id","driver_slug","serial_number") WHERE serial_number is not null and deleted_at is null;--> statement-breakpoint
CREATE INDEX "idempotency_key_created_at_idx" ON "idempotency_key" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "plan_device_idx" ON "plan" USING btree ("device_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "plan_backup_idx" ON "plan" USING btree ("backup_id");--> statement-breakpoint
CREATE INDEX "plan_target_backup_idx" ON "plan" USING btree ("target_backup_id");--> statement-breakpoint
CREATE INDEX "profile_shared_idx" ON "profile" USING btree ("updated_at" DESC NULLS FIRST,"id" DESC NULLS FIRST) WHERE visibility = 'shared' and deleted_at is null;--> statement-breakpoint
CREATE INDEX "profile_owner_idx" ON "profile" USING btree ("owner_id","updated_at" DESC NULLS FIRST,"id" DESC NULLS FIRST) WHERE deleted_at is null;--> statement-breakpoint
CREATE INDEX "profile_search_idx" ON "profile" USING gin ("search");--> statement-breakpoint
CREATE INDEX "rate_limit_refilled_at_idx" ON "rate_limit" USING btree ("refilled_at");--> statement-breakpoint
CREATE UNIQUE INDEX "run_open_idx" ON "run" USING btree ("device_id") WHERE state not in ('kept', 'called-off', 'put-back', 'left');--> statement-breakpoint
CREATE INDEX "run_device_idx" ON "run" USING btree ("device_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "run_owner_idx" ON "run" USING btree ("owner_id","created_at" DESC NULLS FIRST,"id" DESC NULLS FIRST);--> statement-breakpoint
CREATE INDEX "run_plan_idx" ON "run" USING btree ("plan_id");--> statement-breakpoint
CREATE INDEX "run_after_backup_idx" ON "run" USING btree ("after_backup_id");--> statement-breakpoint
CREATE INDEX "screen_owner_idx" ON "screen" USING btree ("owner_id","name","id") WHERE deleted_at is null;--> statement-breakpoint
CREATE INDEX "account_user_idx" ON "account" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "session_id_idx" ON "session" USING btree ("id");--> statement-breakpoint
CREATE INDEX "session_user_idx" ON "session" USING btree ("user_id","last_seen_at");--> statement-breakpoint
CREATE INDEX "session_expires_idx" ON "session" USING btree ("expires");--> statement-breakpoint
CREATE UNIQUE INDEX "user_email_idx" ON "user" USING btree ("email");--> statement-breakpoint
CREATE INDEX "user_created_at_idx" ON "user" USING btree ("created_at","id");