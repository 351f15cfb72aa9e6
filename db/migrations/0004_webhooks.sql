CREATE TABLE "webhook_attempts" (
	"organization_id" uuid NOT NULL,
	"delivery_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"started_at" timestamp(6) with time zone NOT NULL,
	"milliseconds" integer NOT NULL,
	"url" text NOT NULL,
	"address" text,
	"headers" jsonb NOT NULL,
	"failure" text,
	"answer_status" integer,
	"answer_headers" jsonb,
	"answer_body" text,
	"answer_truncated" boolean,
	CONSTRAINT "webhook_attempts_organization_id_delivery_id_number_pk" PRIMARY KEY("organization_id","delivery_id","number")
);
--> statement-breakpoint
ALTER TABLE "webhook_attempts" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "webhook_deliveries" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"endpoint_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"event_id" uuid,
	"event_type" text NOT NULL,
	"project_id" uuid,
	"status" text NOT NULL,
	"reason" text,
	"attempts" integer NOT NULL,
	"next_attempt_at" timestamp(6) with time zone,
	"created_at" timestamp(6) with time zone NOT NULL,
	"ended_at" timestamp(6) with time zone,
	CONSTRAINT "webhook_deliveries_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "webhook_deliveries_kind" CHECK ("webhook_deliveries"."kind" in ('event', 'replay', 'test')),
	CONSTRAINT "webhook_deliveries_status" CHECK ("webhook_deliveries"."status" in ('pending', 'delivered', 'failed')),
	CONSTRAINT "webhook_deliveries_reason" CHECK ("webhook_deliveries"."reason" in ('attempts_exhausted', 'endpoint_gone', 'endpoint_disabled'))
);
--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "webhook_endpoints" (
	"organization_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"url" text NOT NULL,
	"description" text,
	"event_types" text[],
	"project_ids" uuid[],
	"enabled" boolean NOT NULL,
	"disabled_at" timestamp(6) with time zone,
	"disabled_reason" text,
	"failing_since" timestamp(6) with time zone,
	"last_delivered_at" timestamp(6) with time zone,
	"secret_sealed" "bytea" NOT NULL,
	"secret_made_at" timestamp(6) with time zone NOT NULL,
	"previous_secret_sealed" "bytea",
	"previous_secret_ends_at" timestamp(6) with time zone,
	"cursor_epoch" integer NOT NULL,
	"cursor_xid" "xid8" NOT NULL,
	"cursor_seq" bigint NOT NULL,
	"created_at" timestamp(6) with time zone NOT NULL,
	"updated_at" timestamp(6) with time zone NOT NULL,
	CONSTRAINT "webhook_endpoints_organization_id_id_pk" PRIMARY KEY("organization_id","id"),
	CONSTRAINT "webhook_endpoints_disabled_reason" CHECK ("webhook_endpoints"."disabled_reason" in ('by_request', 'gone', 'failing'))
);
--> statement-breakpoint
ALTER TABLE "webhook_endpoints" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "directory" DROP CONSTRAINT "directory_kind";--> statement-breakpoint
ALTER TABLE "webhook_attempts" ADD CONSTRAINT "webhook_attempts_organization_id_delivery_id_webhook_deliveries_organization_id_id_fk" FOREIGN KEY ("organization_id","delivery_id") REFERENCES "public"."webhook_deliveries"("organization_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_organization_id_endpoint_id_webhook_endpoints_organization_id_id_fk" FOREIGN KEY ("organization_id","endpoint_id") REFERENCES "public"."webhook_endpoints"("organization_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_organization_id_event_id_events_organization_id_id_fk" FOREIGN KEY ("organization_id","event_id") REFERENCES "public"."events"("organization_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhook_endpoints" ADD CONSTRAINT "webhook_endpoints_organization_id_organizations_id_fk" FOREIGN KEY ("organization_id") REFERENCES "public"."organizations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "webhook_deliveries_event" ON "webhook_deliveries" USING btree ("organization_id","endpoint_id","event_id") WHERE "webhook_deliveries"."kind" = 'event';--> statement-breakpoint
CREATE INDEX "webhook_deliveries_due" ON "webhook_deliveries" USING btree ("organization_id","next_attempt_at") WHERE "webhook_deliveries"."status" = 'pending';--> statement-breakpoint
CREATE INDEX "webhook_deliveries_list" ON "webhook_deliveries" USING btree ("organization_id","endpoint_id","id");--> statement-breakpoint
ALTER TABLE "directory" ADD CONSTRAINT "directory_kind" CHECK ("directory"."kind" in ('email', 'apiKey', 'session', 'invitation', 'webhook'));--> statement-breakpoint
CREATE POLICY "tenant" ON "webhook_attempts" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("webhook_attempts"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("webhook_attempts"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "webhook_deliveries" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("webhook_deliveries"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("webhook_deliveries"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "tenant" ON "webhook_endpoints" AS PERMISSIVE FOR ALL TO "hubtack_app" USING ("webhook_endpoints"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid)) WITH CHECK ("webhook_endpoints"."organization_id" = (select nullif(current_setting('app.organization_id', true), '')::uuid));--> statement-breakpoint
ALTER TABLE "webhook_endpoints" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "webhook_deliveries" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "webhook_attempts" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON "webhook_endpoints" TO "hubtack_app";--> statement-breakpoint
-- Deliveries end after 30 days, and their attempts with them.
GRANT SELECT, INSERT, UPDATE, DELETE ON "webhook_deliveries" TO "hubtack_app";--> statement-breakpoint
GRANT SELECT, INSERT ON "webhook_attempts" TO "hubtack_app";
