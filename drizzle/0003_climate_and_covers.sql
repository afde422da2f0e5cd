ALTER TABLE "climate_days" ADD COLUMN "wind_m_per_s" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "climate_days" ADD COLUMN "relative_humidity_percent" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "climate_days" ADD COLUMN "sunshine_hours" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "climate_months" ADD COLUMN "wind_m_per_s" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "climate_months" ADD COLUMN "relative_humidity_percent" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "climate_months" ADD COLUMN "sunshine_hours" numeric(24, 3);--> statement-breakpoint
ALTER TABLE "cover_types" ADD COLUMN "membrane_defects" jsonb;--> statement-breakpoint
ALTER TABLE "cover_types" ADD COLUMN "curve_number" numeric(24, 2);