-- Rules that must hold whatever runs at the same time, and what each role may do.

-- Row-level security holds for the owner too.
DO $$
DECLARE t record;
BEGIN
  FOR t IN
    SELECT c.oid::regclass AS name FROM pg_class c
    WHERE c.relnamespace = 'public'::regnamespace AND c.relkind = 'r' AND c.relrowsecurity
  LOOP
    EXECUTE format('ALTER TABLE %s FORCE ROW LEVEL SECURITY', t.name);
  END LOOP;
END $$;--> statement-breakpoint

-- No person in two places, in whatever companies.
ALTER TABLE shifts ADD CONSTRAINT shifts_one_place
  EXCLUDE USING gist (person_id WITH =, held WITH &&) WHERE (state = 'held');--> statement-breakpoint
-- No piece of equipment in two places.
ALTER TABLE equipment_bookings ADD CONSTRAINT equipment_bookings_one_place
  EXCLUDE USING gist (company_id WITH =, equipment_id WITH =, held WITH &&) WHERE (state NOT IN ('refused', 'called-off'));--> statement-breakpoint
-- One crew at a time for each member of a company.
ALTER TABLE crew_memberships ADD CONSTRAINT crew_memberships_one_crew
  EXCLUDE USING gist (company_id WITH =, person_id WITH =, tstzrange(starts_at, ends_at) WITH &&);--> statement-breakpoint
CREATE UNIQUE INDEX shifts_one_per_visit ON shifts (company_id, visit_id, person_id) WHERE state = 'held';--> statement-breakpoint
CREATE UNIQUE INDEX offers_one_open ON offers (company_id, visit_id, person_id) WHERE state = 'open';--> statement-breakpoint
CREATE UNIQUE INDEX mix_orders_one_live ON mix_orders (company_id, visit_id) WHERE state NOT IN ('refused', 'called-off');--> statement-breakpoint
CREATE UNIQUE INDEX equipment_bookings_one_live ON equipment_bookings (company_id, visit_id, equipment_id)
  WHERE state NOT IN ('refused', 'called-off');--> statement-breakpoint

-- Nothing of the business is deleted: no role but the owner may, and the owner sees no company's rows unless set.
GRANT USAGE ON SCHEMA public TO app_web, app_worker, app_cross;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON ALL TABLES IN SCHEMA public TO app_web, app_worker;--> statement-breakpoint
-- History is appended to, never changed; an undone change only says by which revision.
REVOKE UPDATE ON audit, board_changes FROM app_web, app_worker;--> statement-breakpoint
GRANT UPDATE (undone_by_revision) ON board_changes TO app_web;--> statement-breakpoint
-- The parts of a takeoff are replaced as a whole, and numbers that said START are no longer silenced.
GRANT DELETE ON sections, pour_slabs TO app_web;--> statement-breakpoint
GRANT DELETE ON silenced_numbers TO app_web, app_worker;--> statement-breakpoint
-- Sessions end by deletion, and the worker has no business with them or with passwords.
GRANT DELETE ON sessions TO app_web;--> statement-breakpoint
REVOKE ALL ON sessions, person_busy FROM app_worker;--> statement-breakpoint
REVOKE SELECT, INSERT, UPDATE ON people FROM app_worker;--> statement-breakpoint
GRANT SELECT (id, name, language, zone) ON people TO app_worker;--> statement-breakpoint
-- Companies are made by the owner; the web only changes what its members may set.
REVOKE INSERT ON companies FROM app_web, app_worker;--> statement-breakpoint

CREATE SCHEMA app;--> statement-breakpoint
GRANT USAGE ON SCHEMA app TO app_web, app_worker;--> statement-breakpoint
GRANT USAGE, CREATE ON SCHEMA app TO app_cross;--> statement-breakpoint

-- Adds a background job for the company of this transaction; it exists only if the transaction commits.
CREATE FUNCTION app.add_job(identifier text, payload json, job_key text, run_at timestamptz)
RETURNS void LANGUAGE plpgsql VOLATILE SECURITY DEFINER SET search_path = pg_catalog, pg_temp
AS $$
DECLARE
  company uuid := nullif(current_setting('app.company_id', true), '')::uuid;
BEGIN
  IF company IS NULL THEN
    RAISE EXCEPTION 'No company is set.' USING ERRCODE = 'insufficient_privilege';
  END IF;
  PERFORM graphile_worker.add_job(
    identifier,
    payload := (payload::jsonb || jsonb_build_object('companyId', company))::json,
    run_at := run_at,
    job_key := CASE WHEN job_key IS NULL THEN NULL ELSE company::text || ':' || job_key END,
    max_attempts := 12
  );
END $$;--> statement-breakpoint
REVOKE ALL ON FUNCTION app.add_job(text, json, text, timestamptz) FROM PUBLIC;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION app.add_job(text, json, text, timestamptz) TO app_web, app_worker;--> statement-breakpoint

-- When members of this company are not free: taken by another company, or marked by themselves. Nothing more is said.
CREATE FUNCTION app.busy_times(from_at timestamptz, until_at timestamptz)
RETURNS TABLE (person_id uuid, during tstzrange)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
  WITH here AS (SELECT nullif(current_setting('app.company_id', true), '')::uuid AS company_id),
  mine AS (
    SELECT m.person_id FROM public.members m, here WHERE m.company_id = here.company_id AND m.ended_at IS NULL
  )
  SELECT s.person_id, s.held FROM public.shifts s JOIN mine USING (person_id), here
  WHERE s.company_id <> here.company_id AND s.state = 'held' AND s.held && tstzrange(from_at, until_at)
  UNION ALL
  SELECT b.person_id, b.during FROM public.person_busy b JOIN mine USING (person_id)
  WHERE b.ended_at IS NULL AND b.during && tstzrange(from_at, until_at)
$$;--> statement-breakpoint
GRANT SELECT ON members, shifts, person_busy TO app_cross;--> statement-breakpoint
-- The owner is a member of app_cross, to hand it functions, and must see no row by that.
CREATE POLICY members_cross_read ON members FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint
CREATE POLICY shifts_cross_read ON shifts FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint
CREATE POLICY person_busy_cross_read ON person_busy FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint
ALTER FUNCTION app.busy_times(timestamptz, timestamptz) OWNER TO app_cross;--> statement-breakpoint
REVOKE ALL ON FUNCTION app.busy_times(timestamptz, timestamptz) FROM PUBLIC;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION app.busy_times(timestamptz, timestamptz) TO app_web, app_worker;
