ALTER TABLE "control_points" ADD COLUMN "status_act" jsonb;--> statement-breakpoint
CREATE INDEX "grade_checks_setup" ON "grade_checks" USING btree ("organization_id","setup_id","observed_at");