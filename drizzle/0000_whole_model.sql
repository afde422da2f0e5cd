CREATE TABLE "balance_runs" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"number" integer,
	"parameter_set_id" uuid NOT NULL,
	"engine_version" text NOT NULL,
	"input_sha256" text NOT NULL,
	"input" text,
	"problem" text,
	"warnings" jsonb NOT NULL,
	"computed_at" timestamp with time zone DEFAULT now() NOT NULL,
	"frozen_by_id" uuid,
	"accepted_by_id" uuid,
	"accepted_at" timestamp with time zone,
	"note" text,
	CONSTRAINT "balance_runs_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "balance_steps" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"run_id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"plot_id" uuid NOT NULL,
	"cover_type_id" uuid NOT NULL,
	"month" text NOT NULL,
	"from_on" date NOT NULL,
	"day_count" integer NOT NULL,
	"area_m2" double precision NOT NULL,
	"terms" jsonb NOT NULL,
	CONSTRAINT "balance_steps_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "balance_steps_month" CHECK ("balance_steps"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "compare_notes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"month" text NOT NULL,
	"cause" text NOT NULL,
	"state" text NOT NULL,
	"note" text NOT NULL,
	"written_at" timestamp with time zone DEFAULT now() NOT NULL,
	"written_by_id" uuid NOT NULL,
	CONSTRAINT "compare_notes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "compare_notes_month" CHECK ("compare_notes"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "parameter_sets" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"name" text NOT NULL,
	"version" integer NOT NULL,
	"values" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"created_by_id" uuid NOT NULL,
	"confirmed_by_id" uuid,
	"confirmed_at" timestamp with time zone,
	"is_current" boolean DEFAULT false NOT NULL,
	CONSTRAINT "parameter_sets_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "parameter_sets_version" UNIQUE("organisation_id","site_id","name","version")
);
--> statement-breakpoint
CREATE TABLE "climate_days" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"station_id" uuid NOT NULL,
	"site_day" date NOT NULL,
	"kind" text DEFAULT 'measured' NOT NULL,
	"accumulated_days" integer,
	"typed_text" text,
	"import_id" uuid,
	"precipitation_mm" numeric(24, 3),
	"t_min_c" numeric(24, 3),
	"t_max_c" numeric(24, 3),
	"t_mean_c" numeric(24, 3),
	"pet_mm" numeric(24, 3),
	"pan_mm" numeric(24, 3),
	CONSTRAINT "climate_days_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "climate_days_precipitation" CHECK ("climate_days"."precipitation_mm" >= 0)
);
--> statement-breakpoint
CREATE TABLE "climate_gap_choices" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"month" text NOT NULL,
	"variable" text NOT NULL,
	"choice" text NOT NULL,
	"other_station_id" uuid,
	CONSTRAINT "climate_gap_choices_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "climate_gap_choices_month" CHECK ("climate_gap_choices"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "climate_months" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"station_id" uuid NOT NULL,
	"month" text NOT NULL,
	"import_id" uuid,
	"precipitation_mm" numeric(24, 3),
	"t_min_c" numeric(24, 3),
	"t_max_c" numeric(24, 3),
	"t_mean_c" numeric(24, 3),
	"pet_mm" numeric(24, 3),
	"pan_mm" numeric(24, 3),
	CONSTRAINT "climate_months_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "climate_months_month" CHECK ("climate_months"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$'),
	CONSTRAINT "climate_months_precipitation" CHECK ("climate_months"."precipitation_mm" >= 0)
);
--> statement-breakpoint
CREATE TABLE "stations" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"priority" integer DEFAULT 1 NOT NULL,
	"source" text NOT NULL,
	CONSTRAINT "stations_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "stations_name" UNIQUE("organisation_id","site_id","name")
);
--> statement-breakpoint
CREATE TABLE "analytes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"cas" text,
	"basis" text,
	"default_fraction" text,
	"standard_unit" text NOT NULL,
	"aliases" jsonb NOT NULL,
	CONSTRAINT "analytes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "analytes_code" UNIQUE("organisation_id","code")
);
--> statement-breakpoint
CREATE TABLE "import_rows" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"import_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"sheet" text NOT NULL,
	"row_number" integer NOT NULL,
	"state" text NOT NULL,
	"payload" jsonb NOT NULL,
	CONSTRAINT "import_rows_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "imports" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"laboratory_id" uuid,
	"station_id" uuid,
	"file_name" text NOT NULL,
	"file_sha256" text NOT NULL,
	"byte_count" integer NOT NULL,
	"job_number" text,
	"reading" jsonb NOT NULL,
	"counts" jsonb NOT NULL,
	"uploaded_by_id" uuid NOT NULL,
	"uploaded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"confirmed_by_id" uuid,
	"confirmed_at" timestamp with time zone,
	"undone_by_id" uuid,
	"undone_at" timestamp with time zone,
	CONSTRAINT "imports_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "lab_mappings" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"laboratory_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"from_text" text NOT NULL,
	"to_value" text NOT NULL,
	CONSTRAINT "lab_mappings_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "lab_mappings_text" UNIQUE("organisation_id","laboratory_id","kind","from_text")
);
--> statement-breakpoint
CREATE TABLE "lab_qualifiers" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"laboratory_id" uuid NOT NULL,
	"letter" text NOT NULL,
	"meaning" text NOT NULL,
	"wording" text,
	CONSTRAINT "lab_qualifiers_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "lab_qualifiers_letter" UNIQUE("organisation_id","laboratory_id","letter")
);
--> statement-breakpoint
CREATE TABLE "laboratories" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"limit_cited" text DEFAULT 'reporting' NOT NULL,
	CONSTRAINT "laboratories_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "laboratories_name" UNIQUE("organisation_id","name")
);
--> statement-breakpoint
CREATE TABLE "results" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"sample_point_id" uuid NOT NULL,
	"analyte_id" uuid NOT NULL,
	"fraction" text DEFAULT '' NOT NULL,
	"laboratory_id" uuid NOT NULL,
	"import_id" uuid,
	"sheet" text,
	"cell" text,
	"sampled_at" timestamp with time zone,
	"sampled_on" date NOT NULL,
	"site_day" date NOT NULL,
	"raw_text" text NOT NULL,
	"raw_unit" text,
	"comparator" text NOT NULL,
	"value" numeric(24, 9),
	"unit" text NOT NULL,
	"reporting_limit" numeric(24, 9),
	"detection_limit" numeric(24, 9),
	"dilution_factor" numeric(24, 3),
	"qualifier" text,
	"qualifier_meaning" text,
	"missing_reason" text,
	"is_counted" boolean DEFAULT true NOT NULL,
	"not_counted_reason" text,
	"printed_decimals" integer,
	CONSTRAINT "results_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "sample_points" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"place_id" uuid,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"aliases" jsonb NOT NULL,
	CONSTRAINT "sample_points_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "sample_points_code" UNIQUE("organisation_id","site_id","code")
);
--> statement-breakpoint
CREATE TABLE "sampling_plan_items" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sample_point_id" uuid NOT NULL,
	"analyte_id" uuid NOT NULL,
	"fraction" text DEFAULT '' NOT NULL,
	"samples_per_month" integer NOT NULL,
	"turnaround_days" integer DEFAULT 21 NOT NULL,
	"from_on" date NOT NULL,
	"to_on" date,
	CONSTRAINT "sampling_plan_items_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "adjustments" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"meter_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"from_at" timestamp with time zone NOT NULL,
	"to_at" timestamp with time zone NOT NULL,
	"volume_m3" numeric(18, 6),
	"divisor" numeric(24, 9),
	"method" text,
	"inputs" jsonb,
	"accepted_by_id" uuid,
	CONSTRAINT "adjustments_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "adjustments_volume" CHECK ("adjustments"."volume_m3" >= 0)
);
--> statement-breakpoint
CREATE TABLE "condensate" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"sump_id" uuid NOT NULL,
	"month" text NOT NULL,
	"volume_m3" numeric(18, 6) NOT NULL,
	"kind" text NOT NULL,
	CONSTRAINT "condensate_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "condensate_month" CHECK ("condensate"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$'),
	CONSTRAINT "condensate_volume" CHECK ("condensate"."volume_m3" >= 0)
);
--> statement-breakpoint
CREATE TABLE "disputes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"meter_id" uuid NOT NULL,
	"observed_at" timestamp with time zone NOT NULL,
	"chosen_reading_id" uuid NOT NULL,
	CONSTRAINT "disputes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "entries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"site_day" date NOT NULL,
	"from_place_id" uuid NOT NULL,
	"to_place_id" uuid NOT NULL,
	"volume_m3" numeric(18, 6) NOT NULL,
	"basis" text NOT NULL,
	"meter_id" uuid,
	"load_out_id" uuid,
	"return_id" uuid,
	"fact_ids" jsonb NOT NULL,
	"reverses_id" uuid,
	CONSTRAINT "entries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "levels" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"store_id" uuid,
	"sump_id" uuid,
	"observed_at" timestamp with time zone NOT NULL,
	"observed_offset_minutes" smallint NOT NULL,
	"site_day" date NOT NULL,
	"source" text DEFAULT 'typed' NOT NULL,
	"device_id" text,
	"typed_text" text NOT NULL,
	"level_m" numeric(24, 3) NOT NULL,
	"note" text,
	CONSTRAINT "levels_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "loads_out" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"ticket" text NOT NULL,
	"hauler" text NOT NULL,
	"truck" text,
	"from_place_id" uuid NOT NULL,
	"to_place_id" uuid NOT NULL,
	"observed_at" timestamp with time zone NOT NULL,
	"observed_offset_minutes" smallint NOT NULL,
	"site_day" date NOT NULL,
	"source" text DEFAULT 'typed' NOT NULL,
	"device_id" text,
	"nominal_volume_m3" numeric(18, 6),
	"gross_mass_kg" numeric(24, 1),
	"tare_mass_kg" numeric(24, 1),
	"density_kg_per_m3" numeric(24, 2),
	"received_volume_m3" numeric(18, 6),
	"official_volume" text DEFAULT 'nominal' NOT NULL,
	CONSTRAINT "loads_out_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "loads_out_nominal" CHECK ("loads_out"."nominal_volume_m3" >= 0)
);
--> statement-breakpoint
CREATE TABLE "not_read" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"round_point_id" uuid NOT NULL,
	"site_day" date NOT NULL,
	"reason_code" text NOT NULL,
	"note" text,
	CONSTRAINT "not_read_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "pending_changes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"month" text NOT NULL,
	"meter_id" uuid,
	"fact_id" uuid NOT NULL,
	"sentence" text NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"posted_at" timestamp with time zone,
	CONSTRAINT "pending_changes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "pending_changes_month" CHECK ("pending_changes"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "readings" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"meter_id" uuid NOT NULL,
	"observed_at" timestamp with time zone NOT NULL,
	"observed_offset_minutes" smallint NOT NULL,
	"site_day" date NOT NULL,
	"source" text DEFAULT 'typed' NOT NULL,
	"device_id" text,
	"typed_text" text NOT NULL,
	"register_value" numeric(24, 3) NOT NULL,
	"answer" text DEFAULT 'none' NOT NULL,
	"note" text,
	CONSTRAINT "readings_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "readings_register" CHECK ("readings"."register_value" >= 0)
);
--> statement-breakpoint
CREATE TABLE "returns" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"from_place_id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"method" text NOT NULL,
	"volume_m3" numeric(18, 6) NOT NULL,
	"plot_ids" jsonb NOT NULL,
	"observed_at" timestamp with time zone NOT NULL,
	"observed_offset_minutes" smallint NOT NULL,
	"site_day" date NOT NULL,
	"source" text DEFAULT 'typed' NOT NULL,
	"device_id" text,
	CONSTRAINT "returns_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "returns_volume" CHECK ("returns"."volume_m3" >= 0)
);
--> statement-breakpoint
CREATE TABLE "round_notes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"site_day" date NOT NULL,
	"note" text NOT NULL,
	CONSTRAINT "round_notes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "exceedance_clocks" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"exceedance_id" uuid NOT NULL,
	"step" text NOT NULL,
	"due_at" timestamp with time zone NOT NULL,
	"citation" text NOT NULL,
	"done_at" timestamp with time zone,
	"done_by_id" uuid,
	"done_note" text,
	CONSTRAINT "exceedance_clocks_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "exceedance_notes" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"exceedance_id" uuid NOT NULL,
	"note" text NOT NULL,
	"written_at" timestamp with time zone DEFAULT now() NOT NULL,
	"written_by_id" uuid NOT NULL,
	CONSTRAINT "exceedance_notes_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "exceedances" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"limit_id" uuid NOT NULL,
	"period_key" text NOT NULL,
	"month" text NOT NULL,
	"sentence" text NOT NULL,
	"seen_at" timestamp with time zone NOT NULL,
	"seen_by_id" uuid NOT NULL,
	"closed_at" timestamp with time zone,
	"closed_by_id" uuid,
	"cause" text,
	CONSTRAINT "exceedances_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "exceedances_month" CHECK ("exceedances"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "limits" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"permit_id" uuid NOT NULL,
	"sample_point_id" uuid NOT NULL,
	"analyte_id" uuid NOT NULL,
	"fraction" text DEFAULT '' NOT NULL,
	"flow_place_id" uuid,
	"statistic" text NOT NULL,
	"quantity" text NOT NULL,
	"value_text" text,
	"low_text" text,
	"high_text" text,
	"unit" text NOT NULL,
	"is_inclusive" boolean DEFAULT true NOT NULL,
	"samples_min" integer DEFAULT 1 NOT NULL,
	"below_detection_rule" text DEFAULT 'half' NOT NULL,
	"rounding_mode" text DEFAULT 'half-up' NOT NULL,
	"decimals" integer NOT NULL,
	"citation" text NOT NULL,
	"notice_hours" integer,
	"written_notice_days" integer,
	"resample_days" integer,
	"from_on" date NOT NULL,
	"to_on" date,
	"confirmed_by_id" uuid,
	"confirmed_at" timestamp with time zone,
	CONSTRAINT "limits_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "limits_decimals" CHECK ("limits"."decimals" >= 0),
	CONSTRAINT "limits_dates" CHECK ("limits"."to_on" is null or "limits"."to_on" > "limits"."from_on")
);
--> statement-breakpoint
CREATE TABLE "permits" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"number" text NOT NULL,
	"authority" text NOT NULL,
	"regime" text NOT NULL,
	"from_on" date NOT NULL,
	"to_on" date,
	CONSTRAINT "permits_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "permits_dates" CHECK ("permits"."to_on" is null or "permits"."to_on" > "permits"."from_on")
);
--> statement-breakpoint
CREATE TABLE "verdicts" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"limit_id" uuid NOT NULL,
	"month" text NOT NULL,
	"word" text NOT NULL,
	"working" jsonb NOT NULL,
	"computed_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "verdicts_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "verdicts_month" CHECK ("verdicts"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "header_shares" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"place_id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"share_fraction" numeric(24, 6),
	"from_on" date NOT NULL,
	"to_on" date,
	CONSTRAINT "header_shares_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "header_shares_fraction" CHECK ("header_shares"."share_fraction" between 0 and 1),
	CONSTRAINT "header_shares_dates" CHECK ("header_shares"."to_on" is null or "header_shares"."to_on" > "header_shares"."from_on")
);
--> statement-breakpoint
CREATE TABLE "meter_events" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"meter_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"observed_at" timestamp with time zone NOT NULL,
	"site_day" date NOT NULL,
	"register_before" text,
	"register_after" text,
	"digits_after" integer,
	"unit_after" text,
	"multiplier_after" numeric(24, 6),
	"as_found_error_fraction" numeric(24, 6),
	"note" text,
	CONSTRAINT "meter_events_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "meters" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"from_place_id" uuid NOT NULL,
	"to_place_id" uuid NOT NULL,
	"sump_id" uuid,
	"digits" integer NOT NULL,
	"decimals" integer DEFAULT 0 NOT NULL,
	"unit" text NOT NULL,
	"multiplier" numeric(24, 6) DEFAULT '1' NOT NULL,
	"rate_m3_per_day_max" numeric(24, 3) NOT NULL,
	"accuracy_fraction" numeric(24, 6) DEFAULT '0.02' NOT NULL,
	"installed_on" date NOT NULL,
	"is_active" boolean DEFAULT true NOT NULL,
	CONSTRAINT "meters_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "meters_code" UNIQUE("organisation_id","site_id","code"),
	CONSTRAINT "meters_digits" CHECK ("meters"."digits" > 0),
	CONSTRAINT "meters_multiplier" CHECK ("meters"."multiplier" > 0),
	CONSTRAINT "meters_rate" CHECK ("meters"."rate_m3_per_day_max" > 0)
);
--> statement-breakpoint
CREATE TABLE "places" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"name" text NOT NULL,
	"cell_id" uuid,
	CONSTRAINT "places_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "places_name" UNIQUE("organisation_id","site_id","name")
);
--> statement-breakpoint
CREATE TABLE "pump_tests" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"pump_id" uuid NOT NULL,
	"tested_on" date NOT NULL,
	"rate_l_per_s" numeric(24, 3) NOT NULL,
	CONSTRAINT "pump_tests_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "pump_tests_rate" CHECK ("pump_tests"."rate_l_per_s" > 0)
);
--> statement-breakpoint
CREATE TABLE "pumps" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sump_id" uuid NOT NULL,
	"name" text NOT NULL,
	"design_rate_l_per_s" numeric(24, 3),
	CONSTRAINT "pumps_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "store_levels" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"store_id" uuid NOT NULL,
	"level_m" numeric(24, 3) NOT NULL,
	"volume_m3" numeric(24, 3) NOT NULL,
	"surface_m2" numeric(24, 3) NOT NULL,
	CONSTRAINT "store_levels_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "store_levels_level" UNIQUE("organisation_id","store_id","level_m"),
	CONSTRAINT "store_levels_volume" CHECK ("store_levels"."volume_m3" >= 0),
	CONSTRAINT "store_levels_surface" CHECK ("store_levels"."surface_m2" >= 0)
);
--> statement-breakpoint
CREATE TABLE "stores" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"place_id" uuid NOT NULL,
	"code" text NOT NULL,
	"is_covered" boolean NOT NULL,
	"lined_area_m2" numeric(24, 3) DEFAULT '0' NOT NULL,
	"crest_level_m" numeric(24, 3) NOT NULL,
	"operating_level_m" numeric(24, 3) NOT NULL,
	"level_resolution_m" numeric(24, 4) DEFAULT '0.01' NOT NULL,
	"evaporation_factor" numeric(24, 6) DEFAULT '1' NOT NULL,
	CONSTRAINT "stores_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "stores_code" UNIQUE("organisation_id","site_id","code"),
	CONSTRAINT "stores_lined_area" CHECK ("stores"."lined_area_m2" >= 0),
	CONSTRAINT "stores_crest" CHECK ("stores"."crest_level_m" > 0)
);
--> statement-breakpoint
CREATE TABLE "sumps" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"place_id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"code" text NOT NULL,
	"kind" text NOT NULL,
	"area_served_m2" numeric(24, 3) NOT NULL,
	"liner_low_point_above_floor_m" numeric(24, 3) DEFAULT '0' NOT NULL,
	"sensor_above_floor_m" numeric(24, 3) DEFAULT '0' NOT NULL,
	"head_limit_m" numeric(24, 3),
	"action_rate_l_per_ha_day" numeric(24, 3),
	"sump_area_m2" numeric(24, 3),
	"stone_porosity_fraction" numeric(24, 6),
	CONSTRAINT "sumps_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "sumps_code" UNIQUE("organisation_id","site_id","code"),
	CONSTRAINT "sumps_area_served" CHECK ("sumps"."area_served_m2" > 0),
	CONSTRAINT "sumps_porosity" CHECK ("sumps"."stone_porosity_fraction" between 0 and 1)
);
--> statement-breakpoint
CREATE TABLE "access_links" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"purpose" text NOT NULL,
	"secret_hash" text NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "access_links_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "access_links_secret_hash_unique" UNIQUE("secret_hash")
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"site_id" uuid,
	"laboratory_id" uuid,
	"role" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "memberships_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "organisations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"is_demo" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"display_name" text NOT NULL,
	"password_hash" text,
	"disabled_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "people_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	"device" text,
	CONSTRAINT "sessions_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "idempotency_keys" (
	"organisation_id" uuid NOT NULL,
	"key" text NOT NULL,
	"person_id" uuid NOT NULL,
	"route" text NOT NULL,
	"payload_sha256" text NOT NULL,
	"status" integer NOT NULL,
	"response" jsonb,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_keys_organisation_id_key_pk" PRIMARY KEY("organisation_id","key")
);
--> statement-breakpoint
CREATE TABLE "month_closings" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by_id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"supersedes_id" uuid,
	"is_void" text DEFAULT 'no' NOT NULL,
	"reason" text,
	"site_id" uuid NOT NULL,
	"month" text NOT NULL,
	"act" text NOT NULL,
	"run_id" uuid,
	CONSTRAINT "month_closings_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "month_closings_month" CHECK ("month_closings"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$')
);
--> statement-breakpoint
CREATE TABLE "reports" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"quarter" text NOT NULL,
	"issue" integer NOT NULL,
	"file_name" text NOT NULL,
	"file_sha256" text NOT NULL,
	"snapshot_sha256" text NOT NULL,
	"snapshot" jsonb NOT NULL,
	"changes" jsonb NOT NULL,
	"signed_by_id" uuid NOT NULL,
	"signed_at" timestamp with time zone NOT NULL,
	"certification" text NOT NULL,
	"trail_hash" text,
	CONSTRAINT "reports_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "reports_issue" UNIQUE("organisation_id","site_id","quarter","issue")
);
--> statement-breakpoint
CREATE TABLE "tasks" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"role" text NOT NULL,
	"sentence" text NOT NULL,
	"due_on" date,
	"subject_id" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"done_at" timestamp with time zone,
	"done_by_id" uuid,
	CONSTRAINT "tasks_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "trail_entries" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sequence" bigserial NOT NULL,
	"site_id" uuid,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"person_id" uuid NOT NULL,
	"action" text NOT NULL,
	"subject_type" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"sentence" text NOT NULL,
	"reason" text,
	"before" jsonb,
	"after" jsonb,
	CONSTRAINT "trail_entries_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "trail_seals" (
	"organisation_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"first_sequence" integer NOT NULL,
	"last_sequence" integer NOT NULL,
	"row_count" integer NOT NULL,
	"previous_hash" text NOT NULL,
	"hash" text NOT NULL,
	"sealed_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "trail_seals_organisation_id_number_pk" PRIMARY KEY("organisation_id","number")
);
--> statement-breakpoint
CREATE TABLE "cell_areas" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"valid_from_on" date NOT NULL,
	"lined_area_m2" numeric(24, 3) NOT NULL,
	"evidence" text,
	CONSTRAINT "cell_areas_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "cell_areas_positive" CHECK ("cell_areas"."lined_area_m2" > 0)
);
--> statement-breakpoint
CREATE TABLE "cells" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"opened_on" date NOT NULL,
	"last_waste_on" date,
	"closed_on" date,
	"waste_depth_m" numeric(24, 2),
	"initial_waste_deficit_mm" numeric(24, 3) DEFAULT '0' NOT NULL,
	"initial_waste_store_mm" numeric(24, 3) DEFAULT '0' NOT NULL,
	"liner" text DEFAULT 'composite' NOT NULL,
	CONSTRAINT "cells_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "cells_code" UNIQUE("organisation_id","site_id","code"),
	CONSTRAINT "cells_closed_after_opened" CHECK ("cells"."closed_on" is null or "cells"."closed_on" > "cells"."opened_on")
);
--> statement-breakpoint
CREATE TABLE "cover_periods" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"plot_id" uuid NOT NULL,
	"cover_type_id" uuid NOT NULL,
	"from_on" date NOT NULL,
	"to_on" date,
	"evidence" text NOT NULL,
	"initial_soil_store_mm" numeric(24, 3),
	CONSTRAINT "cover_periods_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "cover_periods_dates" CHECK ("cover_periods"."to_on" is null or "cover_periods"."to_on" > "cover_periods"."from_on")
);
--> statement-breakpoint
CREATE TABLE "cover_types" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"name" text NOT NULL,
	"available_water_mm" numeric(24, 3) NOT NULL,
	"has_soil_store" boolean NOT NULL,
	"membrane_pass_fraction" numeric(24, 6),
	"runoff_coefficient_wet" numeric(24, 6) NOT NULL,
	"runoff_coefficient_dry" numeric(24, 6) NOT NULL,
	"runoff_destination" text NOT NULL,
	"pet_factor" numeric(24, 6) DEFAULT '1' NOT NULL,
	"source" text NOT NULL,
	"confirmed_by_id" uuid,
	"confirmed_at" timestamp with time zone,
	CONSTRAINT "cover_types_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "cover_types_name" UNIQUE("organisation_id","site_id","name"),
	CONSTRAINT "cover_types_available_water" CHECK ("cover_types"."available_water_mm" >= 0),
	CONSTRAINT "cover_types_runoff_wet" CHECK ("cover_types"."runoff_coefficient_wet" between 0 and 1),
	CONSTRAINT "cover_types_runoff_dry" CHECK ("cover_types"."runoff_coefficient_dry" between 0 and 1),
	CONSTRAINT "cover_types_membrane" CHECK ("cover_types"."membrane_pass_fraction" between 0 and 1),
	CONSTRAINT "cover_types_pet_factor" CHECK ("cover_types"."pet_factor" >= 0)
);
--> statement-breakpoint
CREATE TABLE "plots" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"parent_id" uuid,
	"name" text NOT NULL,
	"area_m2" numeric(24, 3) NOT NULL,
	"from_on" date NOT NULL,
	"to_on" date,
	CONSTRAINT "plots_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "plots_area" CHECK ("plots"."area_m2" > 0),
	CONSTRAINT "plots_dates" CHECK ("plots"."to_on" is null or "plots"."to_on" > "plots"."from_on")
);
--> statement-breakpoint
CREATE TABLE "round_points" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"every_days" integer DEFAULT 1 NOT NULL,
	"settings" jsonb,
	CONSTRAINT "round_points_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "site_day_rules" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"valid_from_on" date NOT NULL,
	"time_zone" text NOT NULL,
	"day_boundary" text NOT NULL,
	CONSTRAINT "site_day_rules_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "site_day_rules_from" UNIQUE("organisation_id","site_id","valid_from_on")
);
--> statement-breakpoint
CREATE TABLE "sites" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"latitude_deg" numeric(24, 6) NOT NULL,
	"elevation_m" numeric(24, 2) NOT NULL,
	"display_units" text DEFAULT 'metric' NOT NULL,
	"paper_size" text DEFAULT 'A4' NOT NULL,
	"reporting_year_start_month" integer DEFAULT 1 NOT NULL,
	"opened_on" date NOT NULL,
	"report_due_days" integer DEFAULT 60 NOT NULL,
	"measured_interval_hours_max" integer DEFAULT 36 NOT NULL,
	"certification_text" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "sites_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "sites_slug" UNIQUE("organisation_id","slug")
);
--> statement-breakpoint
CREATE TABLE "waste_placed" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"cell_id" uuid NOT NULL,
	"month" text NOT NULL,
	"mass_t" numeric(24, 3) NOT NULL,
	"bulk_density_t_per_m3" numeric(24, 6) NOT NULL,
	"moisture_fraction" numeric(24, 6) NOT NULL,
	"field_capacity_fraction" numeric(24, 6) NOT NULL,
	"source" text NOT NULL,
	CONSTRAINT "waste_placed_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "waste_placed_month" UNIQUE("organisation_id","cell_id","month"),
	CONSTRAINT "waste_placed_month_text" CHECK ("waste_placed"."month" ~ '^[0-9]{4}-(0[1-9]|1[0-2])$'),
	CONSTRAINT "waste_placed_mass" CHECK ("waste_placed"."mass_t" >= 0),
	CONSTRAINT "waste_placed_density" CHECK ("waste_placed"."bulk_density_t_per_m3" > 0),
	CONSTRAINT "waste_placed_moisture" CHECK ("waste_placed"."moisture_fraction" between 0 and 1),
	CONSTRAINT "waste_placed_field_capacity" CHECK ("waste_placed"."field_capacity_fraction" between 0 and 1)
);
--> statement-breakpoint
ALTER TABLE "balance_runs" ADD CONSTRAINT "balance_runs_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "balance_runs" ADD CONSTRAINT "balance_runs_organisation_id_parameter_set_id_parameter_sets_organisation_id_id_fk" FOREIGN KEY ("organisation_id","parameter_set_id") REFERENCES "public"."parameter_sets"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "balance_steps" ADD CONSTRAINT "balance_steps_organisation_id_run_id_balance_runs_organisation_id_id_fk" FOREIGN KEY ("organisation_id","run_id") REFERENCES "public"."balance_runs"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "compare_notes" ADD CONSTRAINT "compare_notes_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "compare_notes" ADD CONSTRAINT "compare_notes_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "parameter_sets" ADD CONSTRAINT "parameter_sets_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "climate_days" ADD CONSTRAINT "climate_days_organisation_id_station_id_stations_organisation_id_id_fk" FOREIGN KEY ("organisation_id","station_id") REFERENCES "public"."stations"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "climate_gap_choices" ADD CONSTRAINT "climate_gap_choices_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "climate_months" ADD CONSTRAINT "climate_months_organisation_id_station_id_stations_organisation_id_id_fk" FOREIGN KEY ("organisation_id","station_id") REFERENCES "public"."stations"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stations" ADD CONSTRAINT "stations_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "import_rows" ADD CONSTRAINT "import_rows_organisation_id_import_id_imports_organisation_id_id_fk" FOREIGN KEY ("organisation_id","import_id") REFERENCES "public"."imports"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "imports" ADD CONSTRAINT "imports_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lab_mappings" ADD CONSTRAINT "lab_mappings_organisation_id_laboratory_id_laboratories_organisation_id_id_fk" FOREIGN KEY ("organisation_id","laboratory_id") REFERENCES "public"."laboratories"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lab_qualifiers" ADD CONSTRAINT "lab_qualifiers_organisation_id_laboratory_id_laboratories_organisation_id_id_fk" FOREIGN KEY ("organisation_id","laboratory_id") REFERENCES "public"."laboratories"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_organisation_id_sample_point_id_sample_points_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sample_point_id") REFERENCES "public"."sample_points"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_organisation_id_analyte_id_analytes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","analyte_id") REFERENCES "public"."analytes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "results" ADD CONSTRAINT "results_organisation_id_laboratory_id_laboratories_organisation_id_id_fk" FOREIGN KEY ("organisation_id","laboratory_id") REFERENCES "public"."laboratories"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sample_points" ADD CONSTRAINT "sample_points_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sample_points" ADD CONSTRAINT "sample_points_organisation_id_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sampling_plan_items" ADD CONSTRAINT "sampling_plan_items_organisation_id_sample_point_id_sample_points_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sample_point_id") REFERENCES "public"."sample_points"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sampling_plan_items" ADD CONSTRAINT "sampling_plan_items_organisation_id_analyte_id_analytes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","analyte_id") REFERENCES "public"."analytes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adjustments" ADD CONSTRAINT "adjustments_organisation_id_meter_id_meters_organisation_id_id_fk" FOREIGN KEY ("organisation_id","meter_id") REFERENCES "public"."meters"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "condensate" ADD CONSTRAINT "condensate_organisation_id_sump_id_sumps_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sump_id") REFERENCES "public"."sumps"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "disputes" ADD CONSTRAINT "disputes_organisation_id_meter_id_meters_organisation_id_id_fk" FOREIGN KEY ("organisation_id","meter_id") REFERENCES "public"."meters"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_organisation_id_from_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","from_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_organisation_id_to_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","to_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_organisation_id_meter_id_meters_organisation_id_id_fk" FOREIGN KEY ("organisation_id","meter_id") REFERENCES "public"."meters"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "levels" ADD CONSTRAINT "levels_organisation_id_store_id_stores_organisation_id_id_fk" FOREIGN KEY ("organisation_id","store_id") REFERENCES "public"."stores"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "levels" ADD CONSTRAINT "levels_organisation_id_sump_id_sumps_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sump_id") REFERENCES "public"."sumps"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "loads_out" ADD CONSTRAINT "loads_out_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "loads_out" ADD CONSTRAINT "loads_out_organisation_id_from_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","from_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "loads_out" ADD CONSTRAINT "loads_out_organisation_id_to_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","to_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "not_read" ADD CONSTRAINT "not_read_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pending_changes" ADD CONSTRAINT "pending_changes_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_organisation_id_meter_id_meters_organisation_id_id_fk" FOREIGN KEY ("organisation_id","meter_id") REFERENCES "public"."meters"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round_notes" ADD CONSTRAINT "round_notes_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exceedance_clocks" ADD CONSTRAINT "exceedance_clocks_organisation_id_exceedance_id_exceedances_organisation_id_id_fk" FOREIGN KEY ("organisation_id","exceedance_id") REFERENCES "public"."exceedances"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exceedance_notes" ADD CONSTRAINT "exceedance_notes_organisation_id_exceedance_id_exceedances_organisation_id_id_fk" FOREIGN KEY ("organisation_id","exceedance_id") REFERENCES "public"."exceedances"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exceedances" ADD CONSTRAINT "exceedances_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exceedances" ADD CONSTRAINT "exceedances_organisation_id_limit_id_limits_organisation_id_id_fk" FOREIGN KEY ("organisation_id","limit_id") REFERENCES "public"."limits"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "limits" ADD CONSTRAINT "limits_organisation_id_permit_id_permits_organisation_id_id_fk" FOREIGN KEY ("organisation_id","permit_id") REFERENCES "public"."permits"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "limits" ADD CONSTRAINT "limits_organisation_id_sample_point_id_sample_points_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sample_point_id") REFERENCES "public"."sample_points"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "limits" ADD CONSTRAINT "limits_organisation_id_analyte_id_analytes_organisation_id_id_fk" FOREIGN KEY ("organisation_id","analyte_id") REFERENCES "public"."analytes"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "limits" ADD CONSTRAINT "limits_organisation_id_flow_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","flow_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permits" ADD CONSTRAINT "permits_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "verdicts" ADD CONSTRAINT "verdicts_organisation_id_limit_id_limits_organisation_id_id_fk" FOREIGN KEY ("organisation_id","limit_id") REFERENCES "public"."limits"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "header_shares" ADD CONSTRAINT "header_shares_organisation_id_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "header_shares" ADD CONSTRAINT "header_shares_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "meter_events" ADD CONSTRAINT "meter_events_organisation_id_meter_id_meters_organisation_id_id_fk" FOREIGN KEY ("organisation_id","meter_id") REFERENCES "public"."meters"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "meters" ADD CONSTRAINT "meters_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "meters" ADD CONSTRAINT "meters_organisation_id_from_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","from_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "meters" ADD CONSTRAINT "meters_organisation_id_to_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","to_place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "meters" ADD CONSTRAINT "meters_organisation_id_sump_id_sumps_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sump_id") REFERENCES "public"."sumps"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "places" ADD CONSTRAINT "places_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "places" ADD CONSTRAINT "places_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pump_tests" ADD CONSTRAINT "pump_tests_organisation_id_pump_id_pumps_organisation_id_id_fk" FOREIGN KEY ("organisation_id","pump_id") REFERENCES "public"."pumps"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pumps" ADD CONSTRAINT "pumps_organisation_id_sump_id_sumps_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sump_id") REFERENCES "public"."sumps"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "store_levels" ADD CONSTRAINT "store_levels_organisation_id_store_id_stores_organisation_id_id_fk" FOREIGN KEY ("organisation_id","store_id") REFERENCES "public"."stores"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stores" ADD CONSTRAINT "stores_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stores" ADD CONSTRAINT "stores_organisation_id_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sumps" ADD CONSTRAINT "sumps_organisation_id_place_id_places_organisation_id_id_fk" FOREIGN KEY ("organisation_id","place_id") REFERENCES "public"."places"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sumps" ADD CONSTRAINT "sumps_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "access_links" ADD CONSTRAINT "access_links_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "month_closings" ADD CONSTRAINT "month_closings_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reports" ADD CONSTRAINT "reports_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tasks" ADD CONSTRAINT "tasks_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cell_areas" ADD CONSTRAINT "cell_areas_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cells" ADD CONSTRAINT "cells_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cover_periods" ADD CONSTRAINT "cover_periods_organisation_id_plot_id_plots_organisation_id_id_fk" FOREIGN KEY ("organisation_id","plot_id") REFERENCES "public"."plots"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cover_periods" ADD CONSTRAINT "cover_periods_organisation_id_cover_type_id_cover_types_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cover_type_id") REFERENCES "public"."cover_types"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cover_types" ADD CONSTRAINT "cover_types_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plots" ADD CONSTRAINT "plots_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round_points" ADD CONSTRAINT "round_points_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "site_day_rules" ADD CONSTRAINT "site_day_rules_organisation_id_site_id_sites_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."sites"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "waste_placed" ADD CONSTRAINT "waste_placed_organisation_id_cell_id_cells_organisation_id_id_fk" FOREIGN KEY ("organisation_id","cell_id") REFERENCES "public"."cells"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "balance_steps_run" ON "balance_steps" USING btree ("organisation_id","run_id","month");--> statement-breakpoint
CREATE INDEX "entries_site_day" ON "entries" USING btree ("organisation_id","site_id","site_day");--> statement-breakpoint
CREATE INDEX "entries_meter_day" ON "entries" USING btree ("organisation_id","meter_id","site_day");--> statement-breakpoint
CREATE INDEX "levels_day" ON "levels" USING btree ("organisation_id","site_day");--> statement-breakpoint
CREATE INDEX "not_read_day" ON "not_read" USING btree ("organisation_id","site_id","site_day");--> statement-breakpoint
CREATE INDEX "readings_meter_time" ON "readings" USING btree ("organisation_id","meter_id","observed_at");--> statement-breakpoint
CREATE INDEX "exceedances_site" ON "exceedances" USING btree ("organisation_id","site_id","month");--> statement-breakpoint
CREATE INDEX "memberships_person" ON "memberships" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "sessions_person" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "trail_entries_sequence" ON "trail_entries" USING btree ("organisation_id","sequence");