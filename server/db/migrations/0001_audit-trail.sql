-- The audit trail only grows. Written by hand: drizzle-kit knows no triggers. Keep it when the other migrations are generated again.
CREATE FUNCTION refuse_change_of_events() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'The audit trail is append-only.' USING ERRCODE = 'restrict_violation';
END $$;--> statement-breakpoint
CREATE TRIGGER events_append_only BEFORE UPDATE OR DELETE OR TRUNCATE ON "events"
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change_of_events();
