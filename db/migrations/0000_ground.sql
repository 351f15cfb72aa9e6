CREATE TABLE "api_keys" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"prefix" text NOT NULL,
	"secret_sha256" "bytea" NOT NULL,
	"scopes" text[] NOT NULL,
	"project_ids" uuid[],
	"responsible_person_id" uuid NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"expires_at" timestamp(6) with time zone,
	"revoked_at" timestamp(6) with time zone,
	"last_used_at" timestamp(6) with time zone,
	"successor_id" uuid,
	CONSTRAINT "api_keys_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "api_keys" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "directory" (
	"handle_sha256" "bytea" PRIMARY KEY NOT NULL,
	"organization_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	CONSTRAINT "directory_kind" CHECK ("directory"."kind" in ('email', 'apiKey', 'session', 'invitation'))
);
--> statement-breakpoint
CREATE TABLE "idempotency_keys" (
	"organization_id" uuid NOT NULL,
	"actor_id" uuid NOT NULL,
	"operation" text NOT NULL,
	"key" text NOT NULL,
	"fingerprint" "bytea" NOT NULL,
	"status" integer NOT NULL,
	"body" text,
	"secret" boolean DEFAULT false NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"expires_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "idempotency_keys_organization_id_actor_id_operation_key_pk" PRIMARY KEY("organization_id","actor_id","operation","key")
);
--> statement-breakpoint
ALTER TABLE "idempotency_keys" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "organizations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"event_epoch" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL
);
--> statement-breakpoint
ALTER TABLE "organizations" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "people" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"role" text NOT NULL,
	"status" text NOT NULL,
	"password_hash" text,
	"invitation_sha256" "bytea",
	"invitation_expires_at" timestamp(6) with time zone,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "people_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "people_email" UNIQUE("organization_id","email"),
	CONSTRAINT "people_role" CHECK ("people"."role" in ('admin', 'surveyor', 'foreman', 'inspector', 'analyst')),
	CONSTRAINT "people_status" CHECK ("people"."status" in ('invited', 'active', 'closed'))
);
--> statement-breakpoint
ALTER TABLE "people" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "sessions" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"handle_sha256" "bytea" NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"expires_at" timestamp(6) with time zone NOT NULL,
	"revoked_at" timestamp(6) with time zone,
	CONSTRAINT "sessions_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "sessions" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "control_point_versions" (
	"organization_id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"version" integer NOT NULL,
	"easting" double precision NOT NULL,
	"northing" double precision NOT NULL,
	"elevation" double precision,
	"sigma_horizontal" double precision NOT NULL,
	"sigma_vertical" double precision NOT NULL,
	"kind" text NOT NULL,
	"description" text,
	"submitted" jsonb NOT NULL,
	"created_by" text NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "control_point_versions_organization_id_project_id_name_version_pk" PRIMARY KEY("organization_id","project_id","name","version"),
	CONSTRAINT "control_point_versions_kind" CHECK ("control_point_versions"."kind" in ('control', 'benchmark', 'target'))
);
--> statement-breakpoint
ALTER TABLE "control_point_versions" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "control_points" (
	"organization_id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"current_version" integer NOT NULL,
	"status" text NOT NULL,
	"updated_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "control_points_organization_id_project_id_name_pk" PRIMARY KEY("organization_id","project_id","name"),
	CONSTRAINT "control_points_status" CHECK ("control_points"."status" in ('trusted', 'suspect', 'quarantined'))
);
--> statement-breakpoint
ALTER TABLE "control_points" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "layers" (
	"organization_id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"version" integer NOT NULL,
	"surface_id" uuid NOT NULL,
	"offset" double precision NOT NULL,
	"below" double precision NOT NULL,
	"above" double precision NOT NULL,
	"citation" text,
	"acceptance" jsonb,
	"created_by" text NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "layers_organization_id_project_id_name_version_pk" PRIMARY KEY("organization_id","project_id","name","version")
);
--> statement-breakpoint
ALTER TABLE "layers" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "surface_data" (
	"organization_id" uuid NOT NULL,
	"sha256" "bytea" NOT NULL,
	"bytes" "bytea" NOT NULL,
	CONSTRAINT "surface_data_organization_id_sha256_pk" PRIMARY KEY("organization_id","sha256")
);
--> statement-breakpoint
ALTER TABLE "surface_data" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "surfaces" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"represents" text NOT NULL,
	"kind" text NOT NULL,
	"sha256" "bytea" NOT NULL,
	"points" integer,
	"triangles" integer,
	"min_easting" double precision,
	"max_easting" double precision,
	"min_northing" double precision,
	"max_northing" double precision,
	"created_by" text NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "surfaces_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "surfaces_content" UNIQUE("organization_id","project_id","sha256","represents"),
	CONSTRAINT "surfaces_kind" CHECK ("surfaces"."kind" in ('tin', 'plane'))
);
--> statement-breakpoint
ALTER TABLE "surfaces" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "bench_checks" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"upload_id" uuid NOT NULL,
	"machine" text NOT NULL,
	"setup_id" uuid,
	"benchmark" text NOT NULL,
	"benchmark_version" integer NOT NULL,
	"edge" text NOT NULL,
	"elevations" double precision[] NOT NULL,
	"known_elevation" double precision NOT NULL,
	"read_elevation" double precision NOT NULL,
	"spread" double precision,
	"difference" double precision NOT NULL,
	"tolerance" double precision NOT NULL,
	"layer_name" text,
	"layer_version" integer,
	"surface_sha256" "bytea",
	"active_offset" double precision,
	"correction_applied_for" text,
	"verdict" text NOT NULL,
	"reasons" text[] NOT NULL,
	"observed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "bench_checks_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "bench_checks_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "bench_checks_edge" CHECK ("bench_checks"."edge" in ('left', 'right', 'centre')),
	CONSTRAINT "bench_checks_verdict" CHECK ("bench_checks"."verdict" in ('pass', 'hold', 'fail'))
);
--> statement-breakpoint
ALTER TABLE "bench_checks" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "grade_checks" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"upload_id" uuid NOT NULL,
	"layer_name" text NOT NULL,
	"layer_version" integer NOT NULL,
	"surface_id" uuid NOT NULL,
	"setup_id" uuid,
	"setup_result_version" integer,
	"in_force" boolean NOT NULL,
	"independent" boolean NOT NULL,
	"easting" double precision NOT NULL,
	"northing" double precision NOT NULL,
	"elevation" double precision NOT NULL,
	"design_elevation" double precision,
	"deviation" double precision,
	"deviation_normal" double precision,
	"standard_deviation" double precision,
	"probability" double precision,
	"verdict" text NOT NULL,
	"reasons" text[] NOT NULL,
	"reading" jsonb,
	"observed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "grade_checks_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "grade_checks_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "grade_checks_verdict" CHECK ("grade_checks"."verdict" in ('pass', 'hold', 'fail'))
);
--> statement-breakpoint
ALTER TABLE "grade_checks" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "instrument_calibrations" (
	"organization_id" uuid NOT NULL,
	"instrument_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"direction" double precision NOT NULL,
	"zenith" double precision NOT NULL,
	"distance" double precision NOT NULL,
	"distance_ppm" double precision NOT NULL,
	"accuracy_stated" boolean NOT NULL,
	"collimation" double precision NOT NULL,
	"instrument_centring" double precision NOT NULL,
	"target_centring" double precision NOT NULL,
	"target_height" double precision NOT NULL,
	"carrier_wavelength" double precision NOT NULL,
	"reference_refractivity" double precision NOT NULL,
	"note" text,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "instrument_calibrations_organization_id_instrument_id_version_pk" PRIMARY KEY("organization_id","instrument_id","version")
);
--> statement-breakpoint
ALTER TABLE "instrument_calibrations" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "instruments" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"serial" text,
	"calibration_version" integer NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "instruments_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "instruments_name" UNIQUE("organization_id","project_id","name"),
	CONSTRAINT "instruments_kind" CHECK ("instruments"."kind" in ('totalStation', 'rover', 'level', 'machine'))
);
--> statement-breakpoint
ALTER TABLE "instruments" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "projects" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"length_unit" text NOT NULL,
	"frame" jsonb NOT NULL,
	"combined_factor" double precision NOT NULL,
	"site_elevation" double precision,
	"refraction" double precision NOT NULL,
	"refraction_sigma" double precision NOT NULL,
	"control_sigma_horizontal" double precision NOT NULL,
	"control_sigma_vertical" double precision NOT NULL,
	"position_sigma_horizontal" double precision,
	"position_sigma_vertical" double precision,
	"setup_valid_minutes" integer NOT NULL,
	"display_decimals" integer NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"updated_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "projects_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "projects_name" UNIQUE("organization_id","name"),
	CONSTRAINT "projects_length_unit" CHECK ("projects"."length_unit" in ('m', 'ft', 'ftUS'))
);
--> statement-breakpoint
ALTER TABLE "projects" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "tolerance_classes" (
	"organization_id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"name" text NOT NULL,
	"position" integer NOT NULL,
	"residual_horizontal" double precision NOT NULL,
	"residual_vertical" double precision NOT NULL,
	"work_radius" double precision NOT NULL,
	"work_horizontal" double precision NOT NULL,
	"work_vertical" double precision NOT NULL,
	"check_required" boolean NOT NULL,
	"citation" text,
	CONSTRAINT "tolerance_classes_organization_id_project_id_name_pk" PRIMARY KEY("organization_id","project_id","name")
);
--> statement-breakpoint
ALTER TABLE "tolerance_classes" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "audit_entries" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"project_id" uuid,
	"actor_kind" text NOT NULL,
	"actor_id" uuid,
	"actor_name" text NOT NULL,
	"request_id" text,
	"details" jsonb NOT NULL,
	"occurred_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "audit_entries_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "audit_entries_actor_kind" CHECK ("audit_entries"."actor_kind" in ('person', 'key', 'job'))
);
--> statement-breakpoint
ALTER TABLE "audit_entries" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "events" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"xid" "xid8" DEFAULT pg_current_xact_id() NOT NULL,
	"seq" bigint GENERATED ALWAYS AS IDENTITY (sequence name "events_seq_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"type" text NOT NULL,
	"subject" text NOT NULL,
	"project_id" uuid,
	"data" jsonb NOT NULL,
	"occurred_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "events_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "events" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "acknowledgements" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"setup_id" uuid NOT NULL,
	"machine" text NOT NULL,
	"reason" text,
	"opened_at" timestamp(6) with time zone NOT NULL,
	"acknowledged_at" timestamp(6) with time zone,
	"acknowledged_by" text,
	"note" text,
	CONSTRAINT "acknowledgements_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "acknowledgements" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "observations" (
	"organization_id" uuid NOT NULL,
	"setup_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"project_id" uuid NOT NULL,
	"check_id" uuid,
	"seq" integer NOT NULL,
	"target" text NOT NULL,
	"purpose" text NOT NULL,
	"face" text NOT NULL,
	"set" integer NOT NULL,
	"direction" double precision,
	"zenith" double precision,
	"slope_distance" double precision,
	"prism_constant_mm" double precision,
	"prism_constant_applied_mm" double precision,
	"applied_ppm" double precision,
	"target_height" double precision NOT NULL,
	"target_centring_sigma" double precision,
	"target_height_sigma" double precision,
	"distance_mode" text NOT NULL,
	"compensator" text NOT NULL,
	"observed_at" timestamp(6) with time zone,
	CONSTRAINT "observations_organization_id_setup_id_client_id_pk" PRIMARY KEY("organization_id","setup_id","client_id"),
	CONSTRAINT "observations_face" CHECK ("observations"."face" in ('left', 'right'))
);
--> statement-breakpoint
ALTER TABLE "observations" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "setup_checks" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"setup_id" uuid NOT NULL,
	"upload_id" uuid NOT NULL,
	"client_id" text,
	"purpose" text NOT NULL,
	"agreed" boolean NOT NULL,
	"result" json NOT NULL,
	"observed_at" timestamp(6) with time zone NOT NULL,
	"result_version" integer NOT NULL,
	CONSTRAINT "setup_checks_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "setup_checks_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "setup_checks_purpose" CHECK ("setup_checks"."purpose" in ('check', 'closing'))
);
--> statement-breakpoint
ALTER TABLE "setup_checks" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "setup_releases" (
	"organization_id" uuid NOT NULL,
	"setup_id" uuid NOT NULL,
	"seq" integer NOT NULL,
	"action" text NOT NULL,
	"machine" text,
	"layer_name" text,
	"layer_version" integer,
	"surface_sha256" "bytea",
	"offset" double precision,
	"note" text,
	"effective_at" timestamp(6) with time zone NOT NULL,
	"recorded_at" timestamp(6) with time zone NOT NULL,
	"valid_until" timestamp(6) with time zone,
	"person_id" uuid NOT NULL,
	"actor_name" text NOT NULL,
	CONSTRAINT "setup_releases_organization_id_setup_id_seq_pk" PRIMARY KEY("organization_id","setup_id","seq"),
	CONSTRAINT "setup_releases_action" CHECK ("setup_releases"."action" in ('release', 'withdraw'))
);
--> statement-breakpoint
ALTER TABLE "setup_releases" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "setup_results" (
	"organization_id" uuid NOT NULL,
	"setup_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"method" text NOT NULL,
	"method_version" text NOT NULL,
	"result" json NOT NULL,
	"computed_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "setup_results_organization_id_setup_id_version_pk" PRIMARY KEY("organization_id","setup_id","version")
);
--> statement-breakpoint
ALTER TABLE "setup_results" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "setups" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"upload_id" uuid NOT NULL,
	"root_id" uuid NOT NULL,
	"station" text NOT NULL,
	"method" text NOT NULL,
	"instrument_id" uuid NOT NULL,
	"instrument_name" text NOT NULL,
	"calibration_version" integer NOT NULL,
	"instrument_height" double precision,
	"tolerance_class" text NOT NULL,
	"temperature" double precision,
	"pressure" double precision,
	"humidity" double precision,
	"observed_at" timestamp(6) with time zone NOT NULL,
	"result_version" integer NOT NULL,
	"verdict" text NOT NULL,
	"state" text NOT NULL,
	"released_at" timestamp(6) with time zone,
	"valid_until" timestamp(6) with time zone,
	"withdrawn_at" timestamp(6) with time zone,
	"supersedes_id" uuid,
	"superseded_by_id" uuid,
	"excluded" jsonb NOT NULL,
	"submitted_by" text NOT NULL,
	"submitter_person_id" uuid NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "setups_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "setups_client_id" UNIQUE("organization_id","project_id","client_id"),
	CONSTRAINT "setups_verdict" CHECK ("setups"."verdict" in ('pass', 'hold', 'fail')),
	CONSTRAINT "setups_state" CHECK ("setups"."state" in ('computed', 'released', 'withdrawn', 'superseded'))
);
--> statement-breakpoint
ALTER TABLE "setups" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "raw_bodies" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sha256" "bytea" NOT NULL,
	"bytes" "bytea" NOT NULL,
	"media_type" text NOT NULL,
	"content_encoding" text,
	"received_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "raw_bodies_organization_id_id_pk" PRIMARY KEY("organization_id","id")
);
--> statement-breakpoint
ALTER TABLE "raw_bodies" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "upload_refusals" (
	"organization_id" uuid NOT NULL,
	"upload_id" uuid NOT NULL,
	"seq" integer NOT NULL,
	"pointer" text NOT NULL,
	"code" text NOT NULL,
	"detail" text NOT NULL,
	"fix" text NOT NULL,
	CONSTRAINT "upload_refusals_organization_id_upload_id_seq_pk" PRIMARY KEY("organization_id","upload_id","seq")
);
--> statement-breakpoint
ALTER TABLE "upload_refusals" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "uploads" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"project_id" uuid NOT NULL,
	"client_id" text,
	"status" text NOT NULL,
	"raw_body_id" uuid NOT NULL,
	"accepted" integer NOT NULL,
	"refused" integer NOT NULL,
	"actor_kind" text NOT NULL,
	"actor_id" uuid NOT NULL,
	"actor_name" text NOT NULL,
	"received_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "uploads_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "uploads_status" CHECK ("uploads"."status" in ('processed', 'refused'))
);
--> statement-breakpoint
ALTER TABLE "uploads" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "api_keys" ADD CONSTRAINT "api_keys_organization_id_responsible_person_id_people_organization_id_id_fk" FOREIGN KEY ("organization_id","responsible_person_id") REFERENCES "public"."people"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "api_keys" ADD CONSTRAINT "api_keys_organization_id_successor_id_api_keys_organization_id_id_fk" FOREIGN KEY ("organization_id","successor_id") REFERENCES "public"."api_keys"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "people" ADD CONSTRAINT "people_organization_id_organizations_id_fk" FOREIGN KEY ("organization_id") REFERENCES "public"."organizations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_organization_id_person_id_people_organization_id_id_fk" FOREIGN KEY ("organization_id","person_id") REFERENCES "public"."people"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "control_point_versions" ADD CONSTRAINT "control_point_versions_organization_id_project_id_name_control_points_organization_id_project_id_name_fk" FOREIGN KEY ("organization_id","project_id","name") REFERENCES "public"."control_points"("organization_id","project_id","name") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "control_points" ADD CONSTRAINT "control_points_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "layers" ADD CONSTRAINT "layers_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "layers" ADD CONSTRAINT "layers_organization_id_surface_id_surfaces_organization_id_id_fk" FOREIGN KEY ("organization_id","surface_id") REFERENCES "public"."surfaces"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "surfaces" ADD CONSTRAINT "surfaces_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "surfaces" ADD CONSTRAINT "surfaces_organization_id_sha256_surface_data_organization_id_sha256_fk" FOREIGN KEY ("organization_id","sha256") REFERENCES "public"."surface_data"("organization_id","sha256") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bench_checks" ADD CONSTRAINT "bench_checks_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bench_checks" ADD CONSTRAINT "bench_checks_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bench_checks" ADD CONSTRAINT "bench_checks_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grade_checks" ADD CONSTRAINT "grade_checks_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grade_checks" ADD CONSTRAINT "grade_checks_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grade_checks" ADD CONSTRAINT "grade_checks_organization_id_project_id_layer_name_layer_version_layers_organization_id_project_id_name_version_fk" FOREIGN KEY ("organization_id","project_id","layer_name","layer_version") REFERENCES "public"."layers"("organization_id","project_id","name","version") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grade_checks" ADD CONSTRAINT "grade_checks_organization_id_surface_id_surfaces_organization_id_id_fk" FOREIGN KEY ("organization_id","surface_id") REFERENCES "public"."surfaces"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grade_checks" ADD CONSTRAINT "grade_checks_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "instrument_calibrations" ADD CONSTRAINT "instrument_calibrations_organization_id_instrument_id_instruments_organization_id_id_fk" FOREIGN KEY ("organization_id","instrument_id") REFERENCES "public"."instruments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "instruments" ADD CONSTRAINT "instruments_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "projects" ADD CONSTRAINT "projects_organization_id_organizations_id_fk" FOREIGN KEY ("organization_id") REFERENCES "public"."organizations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tolerance_classes" ADD CONSTRAINT "tolerance_classes_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgements" ADD CONSTRAINT "acknowledgements_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "observations" ADD CONSTRAINT "observations_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setup_checks" ADD CONSTRAINT "setup_checks_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setup_checks" ADD CONSTRAINT "setup_checks_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setup_releases" ADD CONSTRAINT "setup_releases_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setup_results" ADD CONSTRAINT "setup_results_organization_id_setup_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","setup_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setups" ADD CONSTRAINT "setups_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setups" ADD CONSTRAINT "setups_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setups" ADD CONSTRAINT "setups_organization_id_instrument_id_instruments_organization_id_id_fk" FOREIGN KEY ("organization_id","instrument_id") REFERENCES "public"."instruments"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setups" ADD CONSTRAINT "setups_organization_id_supersedes_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","supersedes_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "setups" ADD CONSTRAINT "setups_organization_id_superseded_by_id_setups_organization_id_id_fk" FOREIGN KEY ("organization_id","superseded_by_id") REFERENCES "public"."setups"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_refusals" ADD CONSTRAINT "upload_refusals_organization_id_upload_id_uploads_organization_id_id_fk" FOREIGN KEY ("organization_id","upload_id") REFERENCES "public"."uploads"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_organization_id_project_id_projects_organization_id_id_fk" FOREIGN KEY ("organization_id","project_id") REFERENCES "public"."projects"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_organization_id_raw_body_id_raw_bodies_organization_id_id_fk" FOREIGN KEY ("organization_id","raw_body_id") REFERENCES "public"."raw_bodies"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "idempotency_keys_expiry" ON "idempotency_keys" USING btree ("organization_id","expires_at");--> statement-breakpoint
CREATE INDEX "sessions_person" ON "sessions" USING btree ("organization_id","person_id");--> statement-breakpoint
CREATE INDEX "bench_checks_machine" ON "bench_checks" USING btree ("organization_id","project_id","machine","id");--> statement-breakpoint
CREATE INDEX "bench_checks_upload" ON "bench_checks" USING btree ("organization_id","upload_id");--> statement-breakpoint
CREATE INDEX "grade_checks_layer" ON "grade_checks" USING btree ("organization_id","project_id","layer_name","id");--> statement-breakpoint
CREATE INDEX "grade_checks_upload" ON "grade_checks" USING btree ("organization_id","upload_id");--> statement-breakpoint
CREATE INDEX "events_order" ON "events" USING btree ("organization_id","xid","seq");--> statement-breakpoint
CREATE INDEX "acknowledgements_project" ON "acknowledgements" USING btree ("organization_id","project_id","id");--> statement-breakpoint
CREATE INDEX "observations_target" ON "observations" USING btree ("organization_id","project_id","target");--> statement-breakpoint
CREATE INDEX "setup_checks_setup" ON "setup_checks" USING btree ("organization_id","setup_id");--> statement-breakpoint
CREATE INDEX "setup_checks_upload" ON "setup_checks" USING btree ("organization_id","upload_id");--> statement-breakpoint
CREATE INDEX "setups_project" ON "setups" USING btree ("organization_id","project_id","id");--> statement-breakpoint
CREATE INDEX "setups_upload" ON "setups" USING btree ("organization_id","upload_id");--> statement-breakpoint
CREATE UNIQUE INDEX "uploads_client_id" ON "uploads" USING btree ("organization_id","project_id","client_id") WHERE "uploads"."status" = 'processed';--> statement-breakpoint
CREATE INDEX "uploads_project" ON "uploads" USING btree ("organization_id","project_id","id");--> statement-breakpoint
CREATE POLICY "tenant" ON "api_keys" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("api_keys"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("api_keys"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "idempotency_keys" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("idempotency_keys"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("idempotency_keys"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "organizations" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("organizations"."id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("organizations"."id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "people" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("people"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("people"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "sessions" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("sessions"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("sessions"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "control_point_versions" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("control_point_versions"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("control_point_versions"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "control_points" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("control_points"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("control_points"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "layers" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("layers"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("layers"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "surface_data" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("surface_data"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("surface_data"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "surfaces" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("surfaces"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("surfaces"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "bench_checks" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("bench_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("bench_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "grade_checks" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("grade_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("grade_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "instrument_calibrations" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("instrument_calibrations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("instrument_calibrations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "instruments" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("instruments"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("instruments"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "projects" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("projects"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("projects"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "tolerance_classes" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("tolerance_classes"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("tolerance_classes"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "audit_entries" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("audit_entries"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("audit_entries"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "events" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("events"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("events"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "acknowledgements" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("acknowledgements"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("acknowledgements"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "observations" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("observations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("observations"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "setup_checks" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("setup_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("setup_checks"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "setup_releases" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("setup_releases"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("setup_releases"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "setup_results" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("setup_results"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("setup_results"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "setups" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("setups"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("setups"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "raw_bodies" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("raw_bodies"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("raw_bodies"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "upload_refusals" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("upload_refusals"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("upload_refusals"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "uploads" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("uploads"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("uploads"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
-- Policies bind the owner too, and no role passes them by.
ALTER TABLE "acknowledgements" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "api_keys" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "audit_entries" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "bench_checks" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "control_point_versions" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "control_points" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "events" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "grade_checks" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "idempotency_keys" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "instrument_calibrations" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "instruments" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "layers" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "observations" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "organizations" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "people" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "projects" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "raw_bodies" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "sessions" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "setup_checks" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "setup_releases" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "setup_results" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "setups" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "surface_data" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "surfaces" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "tolerance_classes" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "upload_refusals" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "uploads" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
-- What is written once is never changed or removed by the app.
GRANT SELECT, INSERT ON "raw_bodies" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "uploads" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "upload_refusals" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "observations" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "setup_results" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "setup_checks" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "setup_releases" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "control_point_versions" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "surface_data" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "surfaces" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "layers" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "grade_checks" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "bench_checks" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "instrument_calibrations" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "events" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "audit_entries" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "organizations" TO "hubtack_app";--> statement-breakpoint
-- What has a state.
GRANT SELECT, INSERT, UPDATE ON "people" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "sessions" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "api_keys" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "projects" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "control_points" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "instruments" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "setups" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON "acknowledgements" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON "tolerance_classes" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, DELETE ON "idempotency_keys" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT, DELETE ON "directory" TO "hubtack_app";--> statement-breakpoint
-- The queue's schema is the app's own. Its table of migrations is made here, since the queue would otherwise begin
-- with CREATE SCHEMA, which needs a right on the whole database.
CREATE SCHEMA "graphile_worker" AUTHORIZATION "hubtack_app";--> statement-breakpoint
CREATE TABLE "graphile_worker"."migrations" (
  "id" int PRIMARY KEY,
  "ts" timestamptz DEFAULT now() NOT NULL,
  "breaking" boolean DEFAULT false NOT NULL
);--> statement-breakpoint
ALTER TABLE "graphile_worker"."migrations" OWNER TO "hubtack_app";--> statement-breakpoint
-- JSON and bytes of a few kilobytes are written on the hot path.
ALTER TABLE "raw_bodies" ALTER COLUMN "bytes" SET COMPRESSION lz4;--> statement-breakpoint
ALTER TABLE "setup_results" ALTER COLUMN "result" SET COMPRESSION lz4;--> statement-breakpoint
ALTER TABLE "setup_checks" ALTER COLUMN "result" SET COMPRESSION lz4;--> statement-breakpoint
-- Who a handle belongs to, in one statement: the tenant is set from the directory, then read. Invoked as the app
-- role, so the policies bind the reading.
CREATE FUNCTION "identify_key"("handle" bytea, "at" timestamptz)
RETURNS TABLE (organization_id uuid, id uuid, name text, scopes text[], project_ids uuid[], responsible_person_id uuid,
  expires_at timestamptz, revoked boolean, expired boolean, closed boolean, stale boolean)
LANGUAGE plpgsql AS $$
BEGIN
  PERFORM set_config('app.organization_id', coalesce((SELECT d.organization_id::text FROM directory d
    WHERE d.handle_sha256 = handle AND d.kind = 'apiKey'), ''), true);
  RETURN QUERY SELECT k.organization_id, k.id, k.name, k.scopes, k.project_ids, k.responsible_person_id, k.expires_at,
      k.revoked_at IS NOT NULL, coalesce(k.expires_at <= at, false), p.status = 'closed',
      k.last_used_at IS NULL OR k.last_used_at < at - interval '1 minute'
    FROM directory d
    JOIN api_keys k ON k.organization_id = d.organization_id AND k.id = d.subject_id
    JOIN people p ON p.organization_id = k.organization_id AND p.id = k.responsible_person_id
    WHERE d.handle_sha256 = handle AND d.kind = 'apiKey';
END $$;--> statement-breakpoint
CREATE FUNCTION "identify_session"("handle" bytea, "at" timestamptz)
RETURNS TABLE (organization_id uuid, id uuid, person_id uuid, expires_at timestamptz, name text, role text)
LANGUAGE plpgsql AS $$
BEGIN
  PERFORM set_config('app.organization_id', coalesce((SELECT d.organization_id::text FROM directory d
    WHERE d.handle_sha256 = handle AND d.kind = 'session'), ''), true);
  RETURN QUERY SELECT s.organization_id, s.id, s.person_id, s.expires_at, p.name, p.role
    FROM directory d
    JOIN sessions s ON s.organization_id = d.organization_id AND s.id = d.subject_id
    JOIN people p ON p.organization_id = s.organization_id AND p.id = s.person_id
    WHERE d.handle_sha256 = handle AND d.kind = 'session'
      AND s.revoked_at IS NULL AND s.expires_at > at AND p.status = 'active';
END $$;
