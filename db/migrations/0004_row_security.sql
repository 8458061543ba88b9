-- Whose rows a connection may touch is the database's business too (decision D22). The server's connections take one of two roles, neither of
-- which owns a table or bypasses row security:
--   rampwell_app    what somebody signed in asks for; sees the rows of the scope that the transaction was opened with, and none without
--   rampwell_house  jobs, sign-in, doors whose authority is a link from a mail: all rows
-- Migrations run as the owner of the database. A new table needs its line in here: tests/api/row-security.test.ts asks for it.
DO $$
DECLARE
  wanted text;
BEGIN
  FOREACH wanted IN ARRAY ARRAY['rampwell_app', 'rampwell_house'] LOOP
    IF NOT EXISTS (SELECT FROM pg_roles WHERE rolname = wanted) THEN
      BEGIN
        EXECUTE format('CREATE ROLE %I NOLOGIN', wanted);
      EXCEPTION
        WHEN duplicate_object OR unique_violation THEN NULL; -- another database of this cluster migrates at the same moment
        WHEN insufficient_privilege THEN
          RAISE EXCEPTION 'The database lacks the role %. Once, as an administrator of PostgreSQL: CREATE ROLE rampwell_app NOLOGIN; CREATE ROLE rampwell_house NOLOGIN; GRANT rampwell_app, rampwell_house TO %;', wanted, quote_ident(current_user);
      END;
    END IF;
    IF EXISTS (SELECT FROM pg_roles WHERE rolname = wanted AND (rolsuper OR rolbypassrls)) THEN
      RAISE EXCEPTION 'The role % may pass by row security. Once, as an administrator of PostgreSQL: ALTER ROLE % NOSUPERUSER NOBYPASSRLS;', wanted, wanted;
    END IF;
    -- From PostgreSQL 16 on, whoever makes a role is its member and may still not act as it: hence the grant also where there is one.
    BEGIN
      EXECUTE format('GRANT %I TO %I', wanted, current_user);
    EXCEPTION WHEN insufficient_privilege THEN
      IF NOT pg_has_role(current_user, wanted, 'MEMBER') THEN
        RAISE EXCEPTION 'The database''s owner may not act as %. Once, as an administrator of PostgreSQL: GRANT rampwell_app, rampwell_house TO %;', wanted, quote_ident(current_user);
      END IF;
    END;
  END LOOP;
END
$$;
--> statement-breakpoint
-- The scope of a transaction, set with it and gone with it (db/client.ts). Policies ask by (select …), so once a statement.
CREATE FUNCTION scope_account() RETURNS text LANGUAGE sql STABLE AS $$
  SELECT nullif(current_setting('rampwell.account', true), '')
$$;
--> statement-breakpoint
-- Sites in scope, for what belongs to a site and concerns no person.
CREATE FUNCTION scope_sites() RETURNS uuid[] LANGUAGE sql STABLE AS $$
  SELECT coalesce(string_to_array(nullif(current_setting('rampwell.sites', true), ''), ',')::uuid[], '{}')
$$;
--> statement-breakpoint
-- Whose records: ids of sites (coordinator, clinician, monitor) or of people (a participant's own, a caregiver's). None for an administrator,
-- who keeps a site and not its people's records.
CREATE FUNCTION scope_keys() RETURNS uuid[] LANGUAGE sql STABLE AS $$
  SELECT coalesce(string_to_array(nullif(current_setting('rampwell.keys', true), ''), ',')::uuid[], '{}')
$$;
--> statement-breakpoint
-- Each row about a person carries the person's site: looked up row by row, it made the planning of the larger statements twice as slow.
-- A participant never changes site, so it never has to change. As the house: who may add the row is the policy's business.
CREATE FUNCTION site_of_row() RETURNS trigger LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  NEW.site_id := (SELECT site_id FROM participant WHERE id = NEW.participant_id);
  RETURN NEW;
END
$$;
--> statement-breakpoint
DO $$
DECLARE
  name text;
BEGIN
  FOREACH name IN ARRAY ARRAY['consent', 'screening', 'training', 'watched_session', 'message', 'caregiver', 'prescription', 'acknowledgement',
    'planned_session', 'device_assignment', 'supply', 'precheck', 'permit', 'session', 'diary', 'photo', 'lockout', 'review'] LOOP
    EXECUTE format('ALTER TABLE %I ADD COLUMN site_id uuid', name);
    EXECUTE format('ALTER TABLE %I DISABLE TRIGGER USER', name);
    EXECUTE format('UPDATE %I t SET site_id = p.site_id FROM participant p WHERE p.id = t.participant_id', name);
    EXECUTE format('ALTER TABLE %I ENABLE TRIGGER USER', name);
    EXECUTE format('ALTER TABLE %I ALTER COLUMN site_id SET NOT NULL', name);
    EXECUTE format('CREATE TRIGGER a_site BEFORE INSERT ON %I FOR EACH ROW EXECUTE FUNCTION site_of_row()', name);
  END LOOP;
END
$$;
--> statement-breakpoint
-- The functions below ask as the house and answer yes or no: within policies their questions would be asked through the policies again.
CREATE FUNCTION scope_charges() RETURNS uuid[] LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT coalesce(array_agg(participant_id), '{}') FROM caregiver WHERE account_id = scope_account() AND closed_at IS NULL
$$;
--> statement-breakpoint
CREATE FUNCTION is_site_in_scope(site uuid) RETURNS boolean LANGUAGE plpgsql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  RETURN site = ANY (scope_sites()) OR EXISTS (SELECT FROM participant p WHERE p.id = ANY (scope_keys()) AND p.site_id = site);
END
$$;
--> statement-breakpoint
CREATE FUNCTION is_account_in_scope(account text) RETURNS boolean LANGUAGE plpgsql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  RETURN account = scope_account()
    OR EXISTS (SELECT FROM membership m WHERE m.account_id = account AND is_site_in_scope(m.site_id))
    OR EXISTS (SELECT FROM participant p WHERE p.account_id = account AND scope_keys() && ARRAY[p.site_id, p.id])
    OR EXISTS (SELECT FROM caregiver c WHERE c.account_id = account AND scope_keys() && ARRAY[c.site_id, c.participant_id]);
END
$$;
--> statement-breakpoint
CREATE FUNCTION is_subject_in_scope(kind text, subject uuid) RETURNS boolean LANGUAGE plpgsql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  IF kind = 'prescription' THEN
    RETURN EXISTS (SELECT FROM prescription p WHERE p.id = subject AND scope_keys() && ARRAY[p.site_id, p.participant_id]);
  ELSIF kind = 'review' THEN
    RETURN EXISTS (SELECT FROM review r WHERE r.id = subject AND scope_keys() && ARRAY[r.site_id, r.participant_id]);
  END IF;
  RETURN EXISTS (SELECT FROM protocol p WHERE p.id = subject AND is_site_in_scope(p.site_id));
END
$$;
--> statement-breakpoint
CREATE FUNCTION is_device_in_scope(device uuid) RETURNS boolean LANGUAGE plpgsql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  RETURN EXISTS (SELECT FROM device d WHERE d.id = device AND d.site_id = ANY (scope_sites()))
    OR EXISTS (SELECT FROM device_assignment a WHERE a.device_id = device AND a.participant_id = ANY (scope_keys()));
END
$$;
--> statement-breakpoint
CREATE FUNCTION is_chain_in_scope(chain text) RETURNS boolean LANGUAGE plpgsql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  IF chain LIKE 'participant:%' THEN
    RETURN EXISTS (SELECT FROM participant p WHERE p.id = substr(chain, 13)::uuid AND scope_keys() && ARRAY[p.site_id, p.id]);
  ELSIF chain LIKE 'site:%' THEN
    RETURN is_site_in_scope(substr(chain, 6)::uuid);
  END IF;
  RETURN chain = 'house' AND scope_account() IS NOT NULL;
END
$$;
--> statement-breakpoint
-- Whether an address is in use is the whole house's business: one address, one person. These say that and nothing more.
CREATE FUNCTION role_of_address(address text) RETURNS text LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT coalesce(
    (SELECT role FROM account WHERE lower(email) = lower(address) LIMIT 1),
    (SELECT 'participant' FROM participant WHERE lower(email) = lower(address) AND closed_at IS NULL LIMIT 1))
$$;
--> statement-breakpoint
CREATE FUNCTION is_staff_invited(address text, at timestamptz) RETURNS boolean LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT EXISTS (SELECT FROM invitation
    WHERE email = address AND closed_at IS NULL AND expires_at > at AND role NOT IN ('participant', 'caregiver'))
$$;
--> statement-breakpoint
-- Owned by the house's role, so that they see all rows also where row security binds the owner.
GRANT CREATE ON SCHEMA public TO rampwell_house;
--> statement-breakpoint
DO $$
DECLARE
  name text;
BEGIN
  FOREACH name IN ARRAY ARRAY['site_of_row()', 'scope_charges()', 'is_site_in_scope(uuid)', 'is_account_in_scope(text)',
    'is_subject_in_scope(text, uuid)', 'is_device_in_scope(uuid)', 'is_chain_in_scope(text)', 'role_of_address(text)',
    'is_staff_invited(text, timestamptz)'] LOOP
    EXECUTE format('ALTER FUNCTION %s OWNER TO rampwell_house', name);
  END LOOP;
END
$$;
--> statement-breakpoint
REVOKE CREATE ON SCHEMA public FROM rampwell_house;
--> statement-breakpoint
DO $$
DECLARE
  of record;
BEGIN
  FOR of IN
    SELECT * FROM (VALUES
      -- An administrator sees whose a stimulator is, by the code; that names and the rest stay out is the server's part.
      ('participant', '(SELECT scope_keys()) && ARRAY[site_id, id] OR site_id = ANY ((SELECT scope_sites())::uuid[])'),
      ('device_assignment', 'own OR site_id = ANY ((SELECT scope_sites())::uuid[])'),
      ('consent', 'own'), ('screening', 'own'), ('training', 'own'), ('watched_session', 'own'), ('message', 'own'), ('course', 'own'),
      ('prescription', 'own'), ('acknowledgement', 'own'), ('planned_session', 'own'), ('supply', 'own'),
      ('precheck', 'own'), ('permit', 'own'), ('session', 'own'), ('diary', 'own'), ('photo', 'own'), ('lockout', 'own'), ('review', 'own'),
      ('worklist_item', 'own'),
      ('caregiver', 'own OR (account_id = (SELECT scope_account()) AND closed_at IS NULL)'),
      ('caregiver_share', 'EXISTS (SELECT FROM caregiver c WHERE c.id = caregiver_id)'),
      ('caregiver_code', 'account_id = (SELECT scope_account()) OR EXISTS (SELECT FROM caregiver c WHERE c.account_id = caregiver_code.account_id)'),
      ('session_event', 'EXISTS (SELECT FROM session s WHERE s.id = session_id)'),
      ('course_pause', 'EXISTS (SELECT FROM course c WHERE c.id = course_id)'),
      ('worklist_claim', 'EXISTS (SELECT FROM worklist_item i WHERE i.id = item_id)'),
      ('device', 'site_id = ANY ((SELECT scope_sites())::uuid[]) OR is_device_in_scope(id)'),
      ('device_state', 'is_device_in_scope(device_id)'),
      ('site', 'id = ANY ((SELECT scope_sites())::uuid[]) OR is_site_in_scope(id)'),
      ('site_counter', 'site_id = ANY ((SELECT scope_sites())::uuid[])'),
      ('protocol', 'site_id = ANY ((SELECT scope_sites())::uuid[]) OR is_site_in_scope(site_id)'),
      ('signature', 'is_subject_in_scope(subject_kind, subject_id)'),
      ('membership', 'site_id = ANY ((SELECT scope_sites())::uuid[]) OR account_id = (SELECT scope_account()) OR is_site_in_scope(site_id)'),
      ('invitation', 'site_id = ANY ((SELECT scope_sites())::uuid[]) OR EXISTS (SELECT FROM caregiver c WHERE c.id = subject_id) OR EXISTS (SELECT FROM participant p WHERE p.id = subject_id)'),
      ('account', 'id = (SELECT scope_account()) OR is_account_in_scope(id)'),
      ('auth_user', 'is_account_in_scope(id)'),
      ('auth_session', 'is_account_in_scope(user_id)'),
      ('auth_credential', 'user_id = (SELECT scope_account())'),
      ('auth_two_factor', 'user_id = (SELECT scope_account())'),
      ('auth_verification', 'false'),
      ('key_seen', 'account_id = (SELECT scope_account())'),
      ('audit_head', 'is_chain_in_scope(chain)'),
      ('audit_entry', 'CASE WHEN participant_id IS NULL THEN site_id = ANY ((SELECT scope_sites())::uuid[]) ELSE own END'),
      ('outbox', 'false')
    ) AS t (name, condition)
  LOOP
    EXECUTE format('ALTER TABLE %I ENABLE ROW LEVEL SECURITY', of.name);
    EXECUTE format('ALTER TABLE %I FORCE ROW LEVEL SECURITY', of.name);
    EXECUTE format('CREATE POLICY house ON %I TO rampwell_house USING (true) WITH CHECK (true)', of.name);
    -- One question a statement, one comparison a row: is the row's site or its person among the keys.
    EXECUTE format('CREATE POLICY scope ON %I TO rampwell_app USING (%s)', of.name,
      regexp_replace(of.condition, '\mown\M', '(SELECT scope_keys()) && ARRAY[site_id, participant_id]', 'g'));
    EXECUTE format('GRANT SELECT, INSERT, UPDATE ON %I TO rampwell_app, rampwell_house', of.name);
  END LOOP;
END
$$;
--> statement-breakpoint
-- What somebody does that concerns nobody's record stands in the chain of their site or of the house: added to by whoever did it.
CREATE POLICY own_acts ON audit_entry FOR INSERT TO rampwell_app
  WITH CHECK (participant_id IS NULL AND actor_id = (SELECT scope_account()) AND is_chain_in_scope(chain));
--> statement-breakpoint
-- A mail is put into the outbox and never read from it again by whoever caused it.
CREATE POLICY told ON outbox FOR INSERT TO rampwell_app WITH CHECK (true);
--> statement-breakpoint
-- The trail is added to and read; nothing of it is changed by anybody.
REVOKE UPDATE ON audit_entry FROM rampwell_app, rampwell_house;
--> statement-breakpoint
REVOKE ALL ON auth_verification FROM rampwell_app;
--> statement-breakpoint
-- Tables of the house: nobody's rows. Of the app's role only what every action needs.
GRANT SELECT ON demo_clock TO rampwell_app;
--> statement-breakpoint
GRANT SELECT, INSERT ON signing_key TO rampwell_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON signing_key, demo_clock, demo_mail, demo_progress, heartbeat, rate_limit TO rampwell_house;
--> statement-breakpoint
GRANT SELECT, INSERT ON audit_anchor, audit_anchor_head TO rampwell_house;
--> statement-breakpoint
-- What may go: sessions and codes of sign-in, answered keys, counters, beats.
GRANT DELETE ON auth_session TO rampwell_app;
--> statement-breakpoint
GRANT DELETE ON auth_session, auth_verification, auth_two_factor, key_seen, heartbeat, rate_limit TO rampwell_house;
--> statement-breakpoint
-- The queue makes its own tables as the owner; a transaction that wakes it does so on its own connection.
CREATE SCHEMA IF NOT EXISTS pgboss;
--> statement-breakpoint
GRANT USAGE ON SCHEMA pgboss TO rampwell_app, rampwell_house;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON ALL TABLES IN SCHEMA pgboss TO rampwell_app, rampwell_house;
--> statement-breakpoint
ALTER DEFAULT PRIVILEGES IN SCHEMA pgboss GRANT SELECT, INSERT, UPDATE ON TABLES TO rampwell_app, rampwell_house;
