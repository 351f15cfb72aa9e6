ALTER TABLE "observations" ALTER COLUMN "target" DROP NOT NULL;--> statement-breakpoint
-- Every shot so far was sent by name.
ALTER TABLE "observations" ADD COLUMN "identified" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "observations" ALTER COLUMN "identified" DROP DEFAULT;
