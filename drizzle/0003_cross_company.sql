-- Functions that look across companies. Each answers one question and no more. Their owner, app_cross, cannot sign
-- in; what it may read or change is said below table by table, in grants and in policies of its own.

-- People are looked up by phone, across companies, when one is added.
CREATE INDEX members_phone ON members (phone_e164) WHERE phone_e164 IS NOT NULL;--> statement-breakpoint

-- A place on a crew that has not begun yet can be taken back.
GRANT DELETE ON crew_memberships TO app_web;--> statement-breakpoint

GRANT SELECT, INSERT ON people TO app_cross;--> statement-breakpoint
GRANT UPDATE (email) ON people TO app_cross;--> statement-breakpoint
GRANT SELECT ON links, notices, sessions TO app_cross;--> statement-breakpoint
CREATE POLICY people_cross_read ON people FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint
CREATE POLICY people_cross_add ON people FOR INSERT TO app_cross WITH CHECK (current_user = 'app_cross');--> statement-breakpoint
CREATE POLICY people_cross_email ON people FOR UPDATE TO app_cross USING (email IS NULL AND current_user = 'app_cross') WITH CHECK (true);--> statement-breakpoint
CREATE POLICY links_cross_read ON links FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint
CREATE POLICY notices_cross_read ON notices FOR SELECT TO app_cross USING (current_user = 'app_cross');--> statement-breakpoint

-- Who signs in with an e-mail address.
CREATE FUNCTION app.person_for_sign_in(wanted_email text)
RETURNS TABLE (person_id uuid, name text, password_hash text)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
  SELECT p.id, p.name, p.password_hash FROM public.people p WHERE p.email = wanted_email::public.citext
$$;--> statement-breakpoint

-- Whose session it is, while it lasts.
CREATE FUNCTION app.session_person(wanted_hash text, at timestamptz)
RETURNS TABLE (person_id uuid, name text, email text, language text, zone text, expires_at timestamptz)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
  SELECT p.id, p.name, p.email::text, p.language, p.zone, s.expires_at
  FROM public.sessions s JOIN public.people p ON p.id = s.person_id
  WHERE s.token_hash = wanted_hash AND s.expires_at > at
$$;--> statement-breakpoint

-- What a link opens, while it lasts.
CREATE FUNCTION app.open_link(wanted_hash text, at timestamptz)
RETURNS TABLE (company_id uuid, person_id uuid, visit_id uuid)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
  SELECT l.company_id, l.person_id, l.visit_id FROM public.links l
  WHERE l.token_hash = wanted_hash AND l.revoked_at IS NULL AND l.expires_at > at
$$;--> statement-breakpoint

-- Which notice a provider's delivery report speaks of.
CREATE FUNCTION app.notice_of_provider(wanted_id text)
RETURNS TABLE (company_id uuid, notice_id uuid)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$ SELECT n.company_id, n.id FROM public.notices n WHERE n.provider_id = wanted_id $$;--> statement-breakpoint

-- The latest texts that went to a number, newest first: an answer by text belongs to one of them.
CREATE FUNCTION app.texts_to(number text)
RETURNS TABLE (company_id uuid, visit_id uuid, person_id uuid, language text)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
  SELECT n.company_id, n.visit_id, n.person_id, n.language FROM public.notices n
  WHERE n.to_address = number AND n.channel = 'sms' AND n.state IN ('sending', 'sent', 'delivered', 'unsure')
  ORDER BY n.queued_at DESC, n.id DESC LIMIT 20
$$;--> statement-breakpoint

-- The person behind each contact that a company adds: by e-mail; else by phone and name together, where that is one
-- person without another e-mail; else someone new. An e-mail is given to a person who has none only where no other
-- company knows them, for whoever reads a person's e-mail can sign in as them.
CREATE FUNCTION app.people_for_contacts(contacts jsonb)
RETURNS TABLE (at_position int, person_id uuid)
LANGUAGE plpgsql VOLATILE SECURITY DEFINER SET search_path = pg_catalog, public, pg_temp
AS $$
DECLARE
  here uuid := nullif(current_setting('app.company_id', true), '')::uuid;
  c record;
BEGIN
  IF here IS NULL THEN
    RAISE EXCEPTION 'No company is set.' USING ERRCODE = 'insufficient_privilege';
  END IF;
  FOR c IN
    SELECT * FROM jsonb_to_recordset(contacts) AS j
      (position int, new_id uuid, name text, email text, phone_e164 text, language text, zone text)
    ORDER BY j.position
  LOOP
    at_position := c.position;
    person_id := NULL;
    IF c.email IS NOT NULL THEN
      SELECT p.id INTO person_id FROM public.people p WHERE p.email = c.email::public.citext;
    END IF;
    IF person_id IS NULL AND c.phone_e164 IS NOT NULL THEN
      SELECT min(m.person_id::text)::uuid INTO person_id
      FROM public.members m JOIN public.people p ON p.id = m.person_id
      WHERE m.phone_e164 = c.phone_e164 AND lower(m.name) = lower(c.name) AND (c.email IS NULL OR p.email IS NULL)
      HAVING count(DISTINCT m.person_id) = 1;
      IF person_id IS NOT NULL AND c.email IS NOT NULL THEN
        UPDATE public.people p SET email = c.email
        WHERE p.id = person_id AND p.email IS NULL AND p.password_hash IS NULL
          AND NOT EXISTS (SELECT FROM public.members m WHERE m.person_id = p.id AND m.company_id <> here);
      END IF;
    END IF;
    IF person_id IS NULL THEN
      INSERT INTO public.people AS p (id, name, email, language, zone)
      VALUES (c.new_id, c.name, c.email, c.language, c.zone)
      ON CONFLICT (email) DO NOTHING RETURNING p.id INTO person_id;
      IF person_id IS NULL THEN
        SELECT p.id INTO STRICT person_id FROM public.people p WHERE p.email = c.email::public.citext;
      END IF;
    END IF;
    RETURN NEXT;
  END LOOP;
END $$;--> statement-breakpoint

ALTER FUNCTION app.person_for_sign_in(text) OWNER TO app_cross;--> statement-breakpoint
ALTER FUNCTION app.session_person(text, timestamptz) OWNER TO app_cross;--> statement-breakpoint
ALTER FUNCTION app.open_link(text, timestamptz) OWNER TO app_cross;--> statement-breakpoint
ALTER FUNCTION app.notice_of_provider(text) OWNER TO app_cross;--> statement-breakpoint
ALTER FUNCTION app.texts_to(text) OWNER TO app_cross;--> statement-breakpoint
ALTER FUNCTION app.people_for_contacts(jsonb) OWNER TO app_cross;--> statement-breakpoint
REVOKE ALL ON FUNCTION app.person_for_sign_in(text), app.session_person(text, timestamptz),
  app.open_link(text, timestamptz), app.notice_of_provider(text), app.texts_to(text), app.people_for_contacts(jsonb)
  FROM PUBLIC;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION app.person_for_sign_in(text), app.session_person(text, timestamptz),
  app.open_link(text, timestamptz), app.texts_to(text) TO app_web;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION app.notice_of_provider(text) TO app_web, app_worker;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION app.people_for_contacts(jsonb) TO app_owner, app_web;
