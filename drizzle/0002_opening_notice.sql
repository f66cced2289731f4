-- A job that mails the administrators about a stated-reason opening finds its clinic from the row.
GRANT SELECT ON chart_opening TO standmark_auth;--> statement-breakpoint
CREATE POLICY chart_opening_auth ON chart_opening FOR SELECT TO standmark_auth USING (true);--> statement-breakpoint
CREATE FUNCTION job_opening_clinic(p_opening uuid)
RETURNS uuid LANGUAGE sql STABLE SECURITY DEFINER SET search_path = public, pg_temp AS $$
  SELECT clinic_id FROM chart_opening WHERE id = p_opening
$$;--> statement-breakpoint
GRANT CREATE ON SCHEMA public TO standmark_auth;--> statement-breakpoint
ALTER FUNCTION job_opening_clinic(uuid) OWNER TO standmark_auth;--> statement-breakpoint
REVOKE CREATE ON SCHEMA public FROM standmark_auth;--> statement-breakpoint
REVOKE ALL ON FUNCTION job_opening_clinic(uuid) FROM PUBLIC;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION job_opening_clinic(uuid) TO standmark_app;
