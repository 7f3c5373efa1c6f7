ALTER TABLE "plan" DROP CONSTRAINT "plan_target_whole";--> statement-breakpoint
ALTER TABLE "plan" DROP CONSTRAINT "plan_target_kind_known";--> statement-breakpoint
ALTER TABLE "plan" ADD COLUMN "target_content" jsonb;--> statement-breakpoint
ALTER TABLE "plan" ADD CONSTRAINT "plan_target_whole" CHECK (num_nonnulls("plan"."target_backup_id", "plan"."target_document", "plan"."target_content") = 1
        and ("plan"."target_kind" = 'revision') = ("plan"."target_revision_id" is not null)
        and ("plan"."target_kind" = 'restore') = ("plan"."target_backup_id" is not null)
        and ("plan"."target_kind" = 'edits' or "plan"."target_content" is null));--> statement-breakpoint
ALTER TABLE "plan" ADD CONSTRAINT "plan_target_kind_known" CHECK ("plan"."target_kind" in ('revision', 'restore', 'document', 'edits'));