-- References that name an organization are composite, so that no child can point at another tenant's parent.
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_org_fk" FOREIGN KEY ("org_id") REFERENCES "organizations" ("org_id");--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_tournament_fk" FOREIGN KEY ("org_id", "tournament_id") REFERENCES "tournaments" ("org_id", "id");--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_event_fk" FOREIGN KEY ("org_id", "event_id") REFERENCES "events" ("org_id", "id") ON DELETE CASCADE;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_school_fk" FOREIGN KEY ("org_id", "school_id") REFERENCES "schools" ("org_id", "id");--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_org_fk" FOREIGN KEY ("org_id") REFERENCES "organizations" ("org_id");--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_tournament_fk" FOREIGN KEY ("org_id", "tournament_id") REFERENCES "tournaments" ("org_id", "id");--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_event_fk" FOREIGN KEY ("org_id", "event_id") REFERENCES "events" ("org_id", "id") ON DELETE CASCADE;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_school_fk" FOREIGN KEY ("org_id", "school_id") REFERENCES "schools" ("org_id", "id");--> statement-breakpoint
ALTER TABLE "settlements" ADD CONSTRAINT "settlements_team_fk" FOREIGN KEY ("org_id", "team_id") REFERENCES "teams" ("org_id", "id");--> statement-breakpoint
ALTER TABLE "addresses" ADD CONSTRAINT "addresses_slug_form" CHECK ("slug" ~ '^[a-z0-9](-?[a-z0-9])*$' AND length("slug") BETWEEN 2 AND 48);--> statement-breakpoint

-- What the application's role may do: read and write rows, own nothing, by-pass nothing.
GRANT USAGE ON SCHEMA public TO fairlead_app;--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON ALL TABLES IN SCHEMA public TO fairlead_app;--> statement-breakpoint
ALTER DEFAULT PRIVILEGES IN SCHEMA public GRANT SELECT, INSERT, UPDATE, DELETE ON TABLES TO fairlead_app;--> statement-breakpoint
-- Histories are only ever added to.
REVOKE UPDATE, DELETE ON "audit_entries", "reading_revisions", "kept_requests", "releases" FROM fairlead_app;--> statement-breakpoint

-- Forced row-level security on every tenant table. An unset or emptied setting lets nothing through.
DO $$
DECLARE t text;
BEGIN
  FOREACH t IN ARRAY ARRAY['organizations', 'memberships', 'invitations', 'audit_entries', 'tournaments', 'divisions', 'schools',
    'teams', 'events', 'readings', 'reading_revisions', 'kept_requests', 'settlements', 'releases']
  LOOP
    EXECUTE format('ALTER TABLE %I ENABLE ROW LEVEL SECURITY', t);
    EXECUTE format('ALTER TABLE %I FORCE ROW LEVEL SECURITY', t);
    EXECUTE format('CREATE POLICY %I ON %I USING (org_id = nullif(current_setting(''app.org_id'', true), '''')::uuid) WITH CHECK (org_id = nullif(current_setting(''app.org_id'', true), '''')::uuid)', t || '_tenant', t);
  END LOOP;
END $$;--> statement-breakpoint
-- A person may read their own memberships, and the organizations they name, without being in one yet.
CREATE POLICY "memberships_own" ON "memberships" FOR SELECT
  USING (person_id = nullif(current_setting('app.actor_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "organizations_own" ON "organizations" FOR SELECT
  USING (EXISTS (SELECT 1 FROM memberships m WHERE m.org_id = organizations.org_id
    AND m.person_id = nullif(current_setting('app.actor_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "invitations_own" ON "invitations" FOR SELECT
  USING (EXISTS (SELECT 1 FROM people p WHERE lower(p.email) = lower(invitations.email)
    AND p.id = nullif(current_setting('app.actor_id', true), '')::uuid));--> statement-breakpoint

-- What a request may see, in one round trip: the organization and the tournament its address names,
-- and what the person holds there. Runs with the caller's rights, under row-level security.
CREATE FUNCTION resolve_scope(p_org_slug text, p_tournament_slug text, p_person uuid) RETURNS jsonb
LANGUAGE plpgsql VOLATILE AS $$
DECLARE
  v_org uuid;
  v_result jsonb;
BEGIN
  SELECT org_id INTO v_org FROM addresses WHERE slug = p_org_slug;
  IF v_org IS NULL THEN RETURN NULL; END IF;
  PERFORM set_config('app.org_id', v_org::text, true), set_config('app.actor_id', coalesce(p_person::text, ''), true);
  SELECT jsonb_build_object(
    'org', jsonb_build_object('id', o.org_id, 'slug', o.slug, 'name', o.name, 'timeZone', o.time_zone, 'currency', o.currency,
      'contact', o.contact, 'isDemo', o.is_demo, 'isSuspended', o.suspended_at IS NOT NULL),
    'tournament', (SELECT jsonb_build_object('id', t.id, 'slug', t.slug, 'name', t.name, 'shortName', t.short_name, 'day', t.day,
        'startsAt', t.starts_at, 'endsAt', t.ends_at, 'isPublished', t.is_published)
      FROM tournaments t WHERE t.org_id = v_org AND t.slug = p_tournament_slug),
    'grants', CASE WHEN p_person IS NULL THEN '[]'::jsonb ELSE coalesce((SELECT jsonb_agg(jsonb_build_object('role', m.role,
        'tournamentId', m.tournament_id, 'eventId', m.event_id, 'schoolId', m.school_id))
      FROM memberships m WHERE m.org_id = v_org AND m.person_id = p_person AND m.state = 'active'), '[]'::jsonb) END)
  INTO v_result FROM organizations o WHERE o.org_id = v_org;
  RETURN v_result;
END $$;--> statement-breakpoint

-- Count one try against a key; true when it is still within the limit. Windows are fixed and start with the first try.
CREATE FUNCTION count_try(p_key text, p_limit integer, p_window interval, p_now timestamptz) RETURNS TABLE (allowed boolean, retry_after double precision)
LANGUAGE sql VOLATILE AS $$
  INSERT INTO throttles AS t (key, count, window_ends_at) VALUES (p_key, 1, p_now + p_window)
  ON CONFLICT (key) DO UPDATE SET
    count = CASE WHEN t.window_ends_at <= p_now THEN 1 ELSE t.count + 1 END,
    window_ends_at = CASE WHEN t.window_ends_at <= p_now THEN p_now + p_window ELSE t.window_ends_at END
  RETURNING t.count <= p_limit, extract(epoch FROM t.window_ends_at - p_now)::double precision
$$;--> statement-breakpoint

-- Keep one reading: effect, revision, audit row, key and answer in one round trip and one transaction.
-- Outcomes: kept, replayed (with the stored answer), key-reused, not-found, locked-out (the event is no longer open),
-- setup-changed, stale (with what stands now). The event's hand-in takes the same advisory lock exclusively.
CREATE FUNCTION keep_reading(p_org uuid, p_actor uuid, p_event uuid, p_setup_version integer, p_team uuid, p_part text, p_value jsonb,
  p_base_version integer, p_key uuid, p_hash text, p_device uuid, p_sequence bigint, p_reason text, p_audit_id uuid, p_now timestamptz) RETURNS jsonb
LANGUAGE plpgsql VOLATILE AS $$
DECLARE
  v_request kept_requests%ROWTYPE;
  v_event record;
  v_current readings%ROWTYPE;
  v_version integer;
  v_answer jsonb;
BEGIN
  PERFORM set_config('app.org_id', p_org::text, true), set_config('app.actor_id', p_actor::text, true);
  PERFORM pg_advisory_xact_lock_shared(hashtextextended(p_event::text, 1));
  -- The same key twice at once: the second waits here for the first.
  PERFORM pg_advisory_xact_lock(hashtextextended(p_key::text, 2));
  SELECT * INTO v_request FROM kept_requests WHERE org_id = p_org AND key = p_key;
  IF FOUND THEN
    IF v_request.request_hash = p_hash AND v_request.person_id = p_actor THEN
      RETURN jsonb_build_object('outcome', 'replayed', 'answer', v_request.answer);
    END IF;
    RETURN jsonb_build_object('outcome', 'key-reused');
  END IF;
  SELECT e.state, e.setup_version, e.setup_locked_at, e.tournament_id INTO v_event
    FROM events e JOIN teams t ON t.org_id = e.org_id AND t.division_id = e.division_id
    WHERE e.org_id = p_org AND e.id = p_event AND t.id = p_team AND t.state = 'confirmed';
  IF NOT FOUND THEN RETURN jsonb_build_object('outcome', 'not-found'); END IF;
  IF v_event.state <> 'open' THEN RETURN jsonb_build_object('outcome', 'locked-out', 'state', v_event.state); END IF;
  IF v_event.setup_locked_at IS NULL OR v_event.setup_version <> p_setup_version THEN
    RETURN jsonb_build_object('outcome', 'setup-changed', 'setupVersion', v_event.setup_version, 'locked', v_event.setup_locked_at IS NOT NULL);
  END IF;
  IF p_base_version = 0 THEN
    INSERT INTO readings (org_id, event_id, team_id, part, version, value, state, kept_at, kept_by)
      VALUES (p_org, p_event, p_team, p_part, 1, p_value, 'kept', p_now, p_actor)
      ON CONFLICT DO NOTHING RETURNING version INTO v_version;
  ELSE
    UPDATE readings SET version = version + 1, value = p_value, state = 'kept', kept_at = p_now, kept_by = p_actor
      WHERE org_id = p_org AND event_id = p_event AND team_id = p_team AND part = p_part AND version = p_base_version
      RETURNING version INTO v_version;
  END IF;
  IF v_version IS NULL THEN
    SELECT * INTO v_current FROM readings WHERE org_id = p_org AND event_id = p_event AND team_id = p_team AND part = p_part;
    IF NOT FOUND OR v_current.value <> p_value THEN
      RETURN jsonb_build_object('outcome', 'stale', 'current', CASE WHEN v_current.version IS NULL THEN NULL ELSE jsonb_build_object(
        'version', v_current.version, 'value', v_current.value, 'keptAt', v_current.kept_at,
        'keptBy', (SELECT name FROM people WHERE id = v_current.kept_by)) END);
    END IF;
    -- Two people typed the same value: they agree, and nothing needs to change.
    v_answer := jsonb_build_object('version', v_current.version, 'keptAt', v_current.kept_at, 'agreed', true);
    INSERT INTO kept_requests (org_id, key, person_id, request_hash, answer, at) VALUES (p_org, p_key, p_actor, p_hash, v_answer, p_now);
    RETURN jsonb_build_object('outcome', 'kept', 'answer', v_answer);
  END IF;
  v_answer := jsonb_build_object('version', v_version, 'keptAt', p_now);
  INSERT INTO reading_revisions (org_id, event_id, team_id, part, version, value, reason, kept_at, kept_by, device_id, device_sequence)
    VALUES (p_org, p_event, p_team, p_part, v_version, p_value, p_reason, p_now, p_actor, p_device, p_sequence);
  INSERT INTO audit_entries (org_id, id, at, actor_id, action, subject_type, subject_id, tournament_id, detail)
    VALUES (p_org, p_audit_id, p_now, p_actor, 'score.kept', 'event', p_event, v_event.tournament_id,
      jsonb_build_object('team', p_team, 'part', p_part, 'version', v_version, 'value', p_value, 'reason', p_reason));
  INSERT INTO kept_requests (org_id, key, person_id, request_hash, answer, at) VALUES (p_org, p_key, p_actor, p_hash, v_answer, p_now);
  RETURN jsonb_build_object('outcome', 'kept', 'answer', v_answer);
END $$;--> statement-breakpoint
GRANT EXECUTE ON ALL FUNCTIONS IN SCHEMA public TO fairlead_app;
--> statement-breakpoint
-- The application may know how far the schema is migrated, and nothing else of the migrations' own table.
CREATE FUNCTION schema_is_migrated(p_known integer) RETURNS boolean LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog AS $$
  SELECT (SELECT count(*) FROM drizzle.__drizzle_migrations) >= p_known
$$;--> statement-breakpoint
GRANT EXECUTE ON FUNCTION schema_is_migrated(integer) TO fairlead_app;
