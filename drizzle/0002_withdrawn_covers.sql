-- A cover entry that was recorded in error is withdrawn and stays; it no longer stands in the way of another.
ALTER TABLE "cover_periods" ADD COLUMN "withdrawn_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "plots" ADD COLUMN "withdrawn_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE cover_periods DROP CONSTRAINT cover_periods_no_overlap;--> statement-breakpoint
ALTER TABLE cover_periods ADD CONSTRAINT cover_periods_no_overlap
  EXCLUDE USING gist (organisation_id WITH =, plot_id WITH =, daterange(from_on, to_on) WITH &&)
  WHERE (withdrawn_at IS NULL);
