CREATE TABLE "level_differences" (
	"organization_id" uuid NOT NULL,
	"level_run_id" uuid NOT NULL,
	"line" integer NOT NULL,
	"project_id" uuid NOT NULL,
	"point" text NOT NULL,
	"point_version" integer NOT NULL,
	"role" text NOT NULL,
	"published" double precision NOT NULL,
	"difference" double precision NOT NULL,
	"standard_deviation" double precision NOT NULL,
	"agrees" boolean NOT NULL,
	"observed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "level_differences_organization_id_level_run_id_line_pk" PRIMARY KEY("organization_id","level_run_id","line"),
	CONSTRAINT "level_differences_role" CHECK ("level_differences"."role" in ('passed', 'end'))
);
--> statement-breakpoint
ALTER TABLE "level_differences" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "level_runs" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"upload_id" uuid NOT NULL,
	"from_point" text NOT NULL,
	"to_point" text NOT NULL,
	"instrument_id" uuid,
	"instrument_name" text,
	"calibration_version" integer,
	"peg_test_id" uuid,
	"staff" text,
	"sights" jsonb NOT NULL,
	"verdict" text NOT NULL,
	"result" json NOT NULL,
	"method_version" text NOT NULL,
	"observed_at" timestamp(6) with time zone NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "level_runs_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "level_runs_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "level_runs_verdict" CHECK ("level_runs"."verdict" in ('pass', 'hold', 'fail'))
);
--> statement-breakpoint
ALTER TABLE "level_runs" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "peg_tests" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"upload_id" uuid NOT NULL,
	"instrument_id" uuid NOT NULL,
	"calibration_version" integer NOT NULL,
	"collimation" double precision NOT NULL,
	"collimation_sigma" double precision NOT NULL,
	"verdict" text NOT NULL,
	"result" json NOT NULL,
	"method_version" text NOT NULL,
	"observed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "peg_tests_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "peg_tests_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "peg_tests_verdict" CHECK ("peg_tests"."verdict" in ('pass', 'hold', 'fail'))
);
--> statement-breakpoint
ALTER TABLE "peg_tests" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "instrument_calibrations" ADD COLUMN "level_sigma" double precision;--> statement-breakpoint
ALTER TABLE "projects" ADD COLUMN "level_limit_per" text;--> statement-breakpoint
ALTER TABLE "projects" ADD COLUMN "level_limit_factor" double precision;--> statement-breakpoint
ALTER TABLE "projects" ADD COLUMN "level_limit_citation" text;--> statement-breakpoint
ALTER TABLE "level_differences" ADD CONSTRAINT "level_differences_organization_id_level_run_id_level_runs_organization_id_id_fk" FOREIGN KEY ("organization_id","level_run_id") REFERENCES "public"."level_runs"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "level_differences" ADD CONSTRAINT "level_differences_organization_id_project_id_point_point_version_control_point_versions_organization_id_project_id_name_version_fk" FOREIGN KEY ("organization_id","project_id","point","point_version") REFERENCES "public"."control_point_versions"("organization_id","project_id","name","version") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "level_runs" ADD CONSTRAINT "level_runs_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "level_runs" ADD CONSTRAINT "level_runs_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "level_runs" ADD CONSTRAINT "level_runs_organization_id_instrument_id_instruments_organization_id_id_fk" FOREIGN KEY ("organization_id","instrument_id") REFERENCES "public"."instruments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "level_runs" ADD CONSTRAINT "level_runs_organization_id_peg_test_id_peg_tests_organization_id_id_fk" FOREIGN KEY ("organization_id","peg_test_id") REFERENCES "public"."peg_tests"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "peg_tests" ADD CONSTRAINT "peg_tests_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "peg_tests" ADD CONSTRAINT "peg_tests_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "peg_tests" ADD CONSTRAINT "peg_tests_organization_id_instrument_id_instruments_organization_id_id_fk" FOREIGN KEY ("organization_id","instrument_id") REFERENCES "public"."instruments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "level_differences_point" ON "level_differences" USING btree ("organization_id","project_id","point","observed_at");--> statement-breakpoint
CREATE INDEX "level_runs_project" ON "level_runs" USING btree ("organization_id","project_id","id");--> statement-breakpoint
CREATE INDEX "level_runs_upload" ON "level_runs" USING btree ("organization_id","upload_id");--> statement-breakpoint
CREATE INDEX "peg_tests_instrument" ON "peg_tests" USING btree ("organization_id","instrument_id","observed_at");--> statement-breakpoint
CREATE INDEX "peg_tests_upload" ON "peg_tests" USING btree ("organization_id","upload_id");--> statement-breakpoint
ALTER TABLE "projects" ADD CONSTRAINT "projects_level_limit" CHECK ("projects"."level_limit_per" in ('length', 'setup'));--> statement-breakpoint
CREATE POLICY "tenant" ON "level_differences" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("level_differences"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("level_differences"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "level_runs" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("level_runs"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("level_runs"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "peg_tests" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("peg_tests"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("peg_tests"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
ALTER TABLE "level_differences" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "level_runs" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "peg_tests" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
GRANT SELECT, INSERT ON "level_differences" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "level_runs" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "peg_tests" TO "hubtack_app";
