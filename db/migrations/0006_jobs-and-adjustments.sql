CREATE TABLE "adjustment_observations" (
	"organization_id" uuid NOT NULL,
	"adjustment_id" uuid NOT NULL,
	"seq" integer NOT NULL,
	"kind" text NOT NULL,
	"from_point" text,
	"to_point" text,
	"removed" boolean NOT NULL,
	"observation" json NOT NULL,
	CONSTRAINT "adjustment_observations_organization_id_adjustment_id_seq_pk" PRIMARY KEY("organization_id","adjustment_id","seq")
);
--> statement-breakpoint
ALTER TABLE "adjustment_observations" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "adjustment_results" (
	"organization_id" uuid NOT NULL,
	"adjustment_id" uuid NOT NULL,
	"method" text NOT NULL,
	"method_version" text NOT NULL,
	"verdict" text NOT NULL,
	"result" json NOT NULL,
	"input" json NOT NULL,
	"computed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "adjustment_results_organization_id_adjustment_id_pk" PRIMARY KEY("organization_id","adjustment_id"),
	CONSTRAINT "adjustment_results_verdict" CHECK ("adjustment_results"."verdict" in ('pass', 'hold', 'fail'))
);
--> statement-breakpoint
ALTER TABLE "adjustment_results" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "adjustments" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"name" text NOT NULL,
	"request" jsonb NOT NULL,
	"created_by" text NOT NULL,
	"created_by_person_id" uuid NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"applied_at" timestamp(6) with time zone,
	"applied_by" text,
	"applied_note" text,
	CONSTRAINT "adjustments_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "adjustments" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "jobs" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid,
	"kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"status" text NOT NULL,
	"attempts" integer NOT NULL,
	"progress" jsonb,
	"problem" jsonb,
	"request_id" text NOT NULL,
	"created_by" text NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"started_at" timestamp(6) with time zone,
	"finished_at" timestamp(6) with time zone,
	"cancel_requested_at" timestamp(6) with time zone,
	CONSTRAINT "jobs_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "jobs_status" CHECK ("jobs"."status" in ('queued', 'running', 'succeeded', 'failed', 'cancelled'))
);
--> statement-breakpoint
ALTER TABLE "jobs" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "control_point_versions" ADD COLUMN "adjustment_id" uuid;--> statement-breakpoint
ALTER TABLE "adjustment_observations" ADD CONSTRAINT "adjustment_observations_organization_id_adjustment_id_adjustment_results_organization_id_adjustment_id_fk" FOREIGN KEY ("organization_id","adjustment_id") REFERENCES "public"."adjustment_results"("organization_id","adjustment_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adjustment_results" ADD CONSTRAINT "adjustment_results_organization_id_adjustment_id_adjustments_organization_id_id_fk" FOREIGN KEY ("organization_id","adjustment_id") REFERENCES "public"."adjustments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adjustments" ADD CONSTRAINT "adjustments_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adjustments" ADD CONSTRAINT "adjustments_organization_id_job_id_jobs_organization_id_id_fk" FOREIGN KEY ("organization_id","job_id") REFERENCES "public"."jobs"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "jobs" ADD CONSTRAINT "jobs_organization_id_organizations_id_fk" FOREIGN KEY ("organization_id") REFERENCES "public"."organizations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "jobs" ADD CONSTRAINT "jobs_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "adjustments_project" ON "adjustments" USING btree ("organization_id","project_id","id");--> statement-breakpoint
CREATE INDEX "jobs_project" ON "jobs" USING btree ("organization_id","project_id","id");--> statement-breakpoint
ALTER TABLE "control_point_versions" ADD CONSTRAINT "control_point_versions_organization_id_adjustment_id_adjustments_organization_id_id_fk" FOREIGN KEY ("organization_id","adjustment_id") REFERENCES "public"."adjustments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE POLICY "tenant" ON "adjustment_observations" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("adjustment_observations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("adjustment_observations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "adjustment_results" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("adjustment_results"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("adjustment_results"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "adjustments" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("adjustments"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("adjustments"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "jobs" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("jobs"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("jobs"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
ALTER TABLE "adjustments" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "adjustment_results" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "adjustment_observations" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "jobs" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
-- Results stay as they were computed; what has a state is the job, and whether an adjustment was applied.
GRANT SELECT, INSERT ON "adjustment_results" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "adjustment_observations" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "adjustments" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "jobs" TO "hubtack_app";
