-- The clinic is a wall in the database too: every table that holds anything of a clinic shows and takes rows of
-- the clinic named by the transaction's setting `app.clinic_id` only. Without the setting there are no rows.
-- The server signs in as `standmark_app`, which owns nothing; what must run before the clinic is known
-- (sign-in, session look-up, jobs) are functions owned by `standmark_auth`, a role nobody can sign in as.
DO $$
BEGIN
  IF NOT EXISTS (SELECT FROM pg_roles WHERE rolname = 'standmark_app') THEN
    CREATE ROLE standmark_app NOLOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOBYPASSRLS;
  END IF;
  IF NOT EXISTS (SELECT FROM pg_roles WHERE rolname = 'standmark_auth') THEN
    CREATE ROLE standmark_auth NOLOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOBYPASSRLS;
  END IF;
  EXECUTE format('GRANT standmark_auth TO %I', current_user);
END
$$;--> statement-breakpoint
CREATE EXTENSION IF NOT EXISTS btree_gist;--> statement-breakpoint
REVOKE CREATE ON SCHEMA public FROM PUBLIC;--> statement-breakpoint
GRANT USAGE ON SCHEMA public TO standmark_app;--> statement-breakpoint
GRANT USAGE, CREATE ON SCHEMA public TO standmark_auth;--> statement-breakpoint

CREATE FUNCTION current_clinic() RETURNS uuid LANGUAGE sql STABLE PARALLEL SAFE
  -- After a transaction-local setting the value is '' and not NULL on that connection: a bare cast would throw.
  AS $$ SELECT nullif(current_setting('app.clinic_id', true), '')::uuid $$;--> statement-breakpoint

DO $$
DECLARE
  name text;
BEGIN
  FOREACH name IN ARRAY ARRAY[
    'user_account', 'sign_in_session', 'patient', 'care_team_member', 'chart_opening', 'consent', 'session', 'bout',
    'clip', 'clip_frame_table', 'still', 'marking', 'marking_version', 'reading', 'audit_event', 'idempotency_key'
  ] LOOP
    EXECUTE format('ALTER TABLE %I ENABLE ROW LEVEL SECURITY', name);
    EXECUTE format('ALTER TABLE %I FORCE ROW LEVEL SECURITY', name);
    EXECUTE format('CREATE POLICY %I ON %I USING (clinic_id = current_clinic()) WITH CHECK (clinic_id = current_clinic())', name || '_clinic', name);
  END LOOP;
END
$$;--> statement-breakpoint
ALTER TABLE clinic ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE clinic FORCE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE POLICY clinic_clinic ON clinic USING (id = current_clinic()) WITH CHECK (id = current_clinic());--> statement-breakpoint
ALTER TABLE sign_in_attempt ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE sign_in_attempt FORCE ROW LEVEL SECURITY;--> statement-breakpoint

-- What the serving role may do, and no more.
GRANT SELECT ON clinic TO standmark_app;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON user_account, patient, consent, session, bout, still, marking TO standmark_app;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON sign_in_session, care_team_member, clip, clip_frame_table, idempotency_key TO standmark_app;--> statement-breakpoint
GRANT DELETE ON still TO standmark_app;--> statement-breakpoint
GRANT SELECT, INSERT ON chart_opening, marking_version, reading, audit_event TO standmark_app;--> statement-breakpoint

-- History is not rewritten, by nobody.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END
$$;--> statement-breakpoint
CREATE TRIGGER audit_event_append_only BEFORE UPDATE OR DELETE ON audit_event FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER audit_event_no_truncate BEFORE TRUNCATE ON audit_event FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER marking_version_append_only BEFORE UPDATE OR DELETE ON marking_version FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER marking_version_no_truncate BEFORE TRUNCATE ON marking_version FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER reading_append_only BEFORE UPDATE OR DELETE ON reading FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER reading_no_truncate BEFORE TRUNCATE ON reading FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint

CREATE FUNCTION consent_only_withdrawal() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' OR OLD.withdrawn_at IS NOT NULL
    OR (to_jsonb(NEW) - 'withdrawn_at' - 'withdrawn_by_id') IS DISTINCT FROM (to_jsonb(OLD) - 'withdrawn_at' - 'withdrawn_by_id') THEN
    RAISE EXCEPTION 'a consent is kept as it was given; only its withdrawal can be added, once' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END
$$;--> statement-breakpoint
CREATE TRIGGER consent_kept BEFORE UPDATE OR DELETE ON consent FOR EACH ROW EXECUTE FUNCTION consent_only_withdrawal();--> statement-breakpoint

-- One person cannot stand twice at the same time; a running bout has no end yet.
ALTER TABLE bout ADD CONSTRAINT bout_no_overlap EXCLUDE USING gist (patient_id WITH =, tstzrange(started_at, ended_at) WITH &&);--> statement-breakpoint

-- Before the clinic is known.
GRANT SELECT ON clinic, user_account, clip TO standmark_auth;--> statement-breakpoint
GRANT SELECT, UPDATE ON sign_in_session TO standmark_auth;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON sign_in_attempt TO standmark_auth;--> statement-breakpoint
CREATE POLICY clinic_auth ON clinic FOR SELECT TO standmark_auth USING (true);--> statement-breakpoint
CREATE POLICY user_account_auth ON user_account FOR SELECT TO standmark_auth USING (true);--> statement-breakpoint
CREATE POLICY clip_auth ON clip FOR SELECT TO standmark_auth USING (true);--> statement-breakpoint
CREATE POLICY sign_in_session_auth ON sign_in_session TO standmark_auth USING (true) WITH CHECK (true);--> statement-breakpoint
CREATE POLICY sign_in_attempt_auth ON sign_in_attempt TO standmark_auth USING (true) WITH CHECK (true);--> statement-breakpoint

CREATE FUNCTION auth_begin_attempt(p_id uuid, p_account text, p_limit int, p_window interval)
RETURNS int LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
-- Counts the attempt as failed until it is said to have succeeded, so that parallel guesses cannot slip through.
-- Returns null when it may go on, else the seconds until it may.
DECLARE
  failures int;
  oldest timestamptz;
BEGIN
  PERFORM pg_advisory_xact_lock(hashtextextended('sign-in:' || p_account, 0));
  DELETE FROM sign_in_attempt WHERE account = p_account AND at < now() - interval '7 days';
  SELECT count(*), min(at) INTO failures, oldest FROM (
    SELECT at FROM sign_in_attempt WHERE account = p_account AND NOT is_success AND at > now() - p_window ORDER BY at DESC LIMIT p_limit
  ) AS recent;
  IF failures >= p_limit THEN
    RETURN greatest(1, ceil(extract(epoch FROM oldest + p_window - now())))::int;
  END IF;
  INSERT INTO sign_in_attempt (id, account) VALUES (p_id, p_account);
  RETURN NULL;
END
$$;--> statement-breakpoint

CREATE FUNCTION auth_attempt_succeeded(p_id uuid)
RETURNS void LANGUAGE sql SECURITY DEFINER SET search_path = public, pg_temp AS $$
  UPDATE sign_in_attempt SET is_success = true WHERE id = p_id
$$;--> statement-breakpoint

CREATE FUNCTION auth_account(p_email text)
RETURNS TABLE (id uuid, clinic_id uuid, password_hash text, is_disabled boolean)
LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT a.id, a.clinic_id, a.password_hash, a.disabled_at IS NOT NULL FROM user_account a WHERE lower(a.email) = lower(p_email)
$$;--> statement-breakpoint

CREATE FUNCTION auth_session(p_token_hash bytea, p_idle interval)
RETURNS TABLE (session_id uuid, user_id uuid, clinic_id uuid, name text, email text, roles text[], patient_id uuid, clinic_name text, time_zone text, units text)
LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  -- Written at most once a minute: a look-up is on the path of every request.
  UPDATE sign_in_session s SET last_seen_at = now()
  WHERE s.token_hash = p_token_hash AND s.revoked_at IS NULL AND s.expires_at > now()
    AND s.last_seen_at > now() - p_idle AND s.last_seen_at < now() - interval '1 minute';
  RETURN QUERY
  SELECT s.id, a.id, a.clinic_id, a.name, a.email, a.roles, a.patient_id, c.name, c.time_zone, c.units
  FROM sign_in_session s
  JOIN user_account a ON a.id = s.user_id AND a.disabled_at IS NULL
  JOIN clinic c ON c.id = a.clinic_id
  WHERE s.token_hash = p_token_hash AND s.revoked_at IS NULL AND s.expires_at > now() AND s.last_seen_at > now() - p_idle;
END
$$;--> statement-breakpoint

CREATE FUNCTION auth_revoke_session(p_token_hash bytea)
RETURNS void LANGUAGE sql SECURITY DEFINER SET search_path = public, pg_temp AS $$
  UPDATE sign_in_session SET revoked_at = now() WHERE token_hash = p_token_hash AND revoked_at IS NULL
$$;--> statement-breakpoint

-- A job's payload names a clip; its clinic comes from the row and not from the payload.
CREATE FUNCTION job_clip_clinic(p_clip uuid)
RETURNS uuid LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT clinic_id FROM clip WHERE id = p_clip
$$;--> statement-breakpoint
CREATE FUNCTION job_unfinished_clips(p_status text, p_idle interval)
RETURNS TABLE (id uuid, clinic_id uuid) LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT id, clinic_id FROM clip WHERE status = p_status AND status IN ('uploading', 'processing') AND updated_at < now() - p_idle ORDER BY updated_at LIMIT 1000
$$;--> statement-breakpoint

DO $$
DECLARE
  name text;
BEGIN
  FOREACH name IN ARRAY ARRAY[
    'auth_begin_attempt(uuid, text, int, interval)', 'auth_attempt_succeeded(uuid)', 'auth_account(text)',
    'auth_session(bytea, interval)', 'auth_revoke_session(bytea)', 'job_clip_clinic(uuid)', 'job_unfinished_clips(text, interval)'
  ] LOOP
    EXECUTE format('ALTER FUNCTION %s OWNER TO standmark_auth', name);
    EXECUTE format('REVOKE ALL ON FUNCTION %s FROM PUBLIC', name);
    EXECUTE format('GRANT EXECUTE ON FUNCTION %s TO standmark_app', name);
  END LOOP;
END
$$;--> statement-breakpoint
REVOKE CREATE ON SCHEMA public FROM standmark_auth;
