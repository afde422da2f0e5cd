-- What a generated migration cannot say: no two cover types at once on one plot, no two shares of one header and cell
-- at once, and the few functions that look across organisations before a person is known.
ALTER TABLE cover_periods ADD CONSTRAINT cover_periods_no_overlap
  EXCLUDE USING gist (organisation_id WITH =, plot_id WITH =, daterange(from_on, to_on) WITH &&);
--> statement-breakpoint
ALTER TABLE header_shares ADD CONSTRAINT header_shares_no_overlap
  EXCLUDE USING gist (organisation_id WITH =, place_id WITH =, cell_id WITH =, daterange(from_on, to_on) WITH &&);
--> statement-breakpoint
CREATE UNIQUE INDEX parameter_sets_one_current ON parameter_sets (organisation_id, site_id) WHERE is_current;
--> statement-breakpoint
CREATE UNIQUE INDEX balance_runs_one_working ON balance_runs (organisation_id, site_id) WHERE kind = 'working';
--> statement-breakpoint
CREATE UNIQUE INDEX entries_reversed_once ON entries (organisation_id, reverses_id) WHERE reverses_id IS NOT NULL;
--> statement-breakpoint
CREATE UNIQUE INDEX exceedances_once ON exceedances (organisation_id, limit_id, period_key);
--> statement-breakpoint
CREATE INDEX climate_days_station_day ON climate_days (organisation_id, station_id, site_day);
--> statement-breakpoint
CREATE INDEX climate_months_station_month ON climate_months (organisation_id, station_id, month);
--> statement-breakpoint
CREATE INDEX results_site_day ON results (organisation_id, site_id, site_day);
--> statement-breakpoint
CREATE INDEX trail_entries_subject ON trail_entries (organisation_id, subject_id);
--> statement-breakpoint
CREATE FUNCTION sign_in_lookup(p_email text)
RETURNS TABLE (person_id uuid, password_hash text, display_name text, disabled_at timestamptz, organisations jsonb)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public AS $$
  SELECT p.id, p.password_hash, p.display_name, p.disabled_at,
    coalesce((SELECT jsonb_agg(DISTINCT jsonb_build_object('id', o.id, 'name', o.name))
      FROM memberships m JOIN organisations o ON o.id = m.organisation_id
      WHERE m.person_id = p.id AND m.ended_at IS NULL), '[]'::jsonb)
  FROM people p WHERE p.email = lower(p_email)
$$;
--> statement-breakpoint
CREATE FUNCTION demo_people()
RETURNS TABLE (email text, display_name text, role text, organisation_id uuid)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public AS $$
  SELECT p.email, p.display_name, m.role, m.organisation_id
  FROM memberships m JOIN people p ON p.id = m.person_id JOIN organisations o ON o.id = m.organisation_id
  WHERE o.is_demo AND m.ended_at IS NULL
$$;
--> statement-breakpoint
CREATE FUNCTION access_link_lookup(p_secret_hash text)
RETURNS TABLE (organisation_id uuid, id uuid, person_id uuid, email text, purpose text, expires_at timestamptz, used_at timestamptz)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public AS $$
  SELECT a.organisation_id, a.id, a.person_id, p.email, a.purpose, a.expires_at, a.used_at
  FROM access_links a JOIN people p ON p.id = a.person_id WHERE a.secret_hash = p_secret_hash
$$;
--> statement-breakpoint
CREATE FUNCTION person_for_invitation(p_id uuid, p_email text, p_display_name text)
RETURNS uuid LANGUAGE plpgsql SECURITY DEFINER SET search_path = public AS $$
DECLARE found uuid;
BEGIN
  INSERT INTO people (id, email, display_name) VALUES (p_id, lower(p_email), p_display_name) ON CONFLICT (email) DO NOTHING;
  SELECT id INTO found FROM people WHERE email = lower(p_email);
  RETURN found;
END $$;
--> statement-breakpoint
CREATE FUNCTION found_organisation(p_organisation_id uuid, p_name text, p_is_demo boolean, p_person_id uuid, p_email text, p_display_name text, p_password_hash text)
RETURNS boolean LANGUAGE plpgsql SECURITY DEFINER SET search_path = public AS $$
BEGIN
  PERFORM pg_advisory_xact_lock(7201);
  IF EXISTS (SELECT 1 FROM organisations) THEN RETURN false; END IF;
  INSERT INTO organisations (id, name, is_demo) VALUES (p_organisation_id, p_name, p_is_demo);
  INSERT INTO people (id, email, display_name, password_hash) VALUES (p_person_id, lower(p_email), p_display_name, p_password_hash);
  INSERT INTO memberships (organisation_id, id, person_id, role) VALUES (p_organisation_id, gen_random_uuid(), p_person_id, 'admin');
  RETURN true;
END $$;
--> statement-breakpoint
CREATE FUNCTION installation_state()
RETURNS TABLE (organisation_count bigint, has_demo boolean)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public AS $$
  SELECT count(*), coalesce(bool_or(is_demo), false) FROM organisations
$$;
--> statement-breakpoint
CREATE FUNCTION organisations_to_seal() RETURNS TABLE (organisation_id uuid)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public AS $$
  SELECT id FROM organisations
$$;
--> statement-breakpoint
DO $$
DECLARE t text;
BEGIN
  FOR t IN SELECT table_name FROM information_schema.columns WHERE table_schema = 'public' AND column_name = 'supersedes_id' LOOP
    EXECUTE format('CREATE UNIQUE INDEX %I ON %I (organisation_id, supersedes_id) WHERE supersedes_id IS NOT NULL', t || '_superseded_once', t);
  END LOOP;
END $$;
