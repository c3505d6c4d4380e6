-- Extensions, and the one table that every other deed writes to.
CREATE EXTENSION IF NOT EXISTS postgis;
CREATE EXTENSION IF NOT EXISTS btree_gist;
CREATE EXTENSION IF NOT EXISTS citext;

CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'rows of % are never changed or removed', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;

-- What was done, by whom, to what: the audit log. Views of an exact place are written here too.
CREATE TABLE event (
  id bigint GENERATED ALWAYS AS IDENTITY PRIMARY KEY,
  at timestamptz NOT NULL,
  actor_id uuid,
  action text NOT NULL,
  thing text NOT NULL,
  thing_id uuid,
  from_status text,
  to_status text,
  data jsonb NOT NULL DEFAULT '{}',
  request_id text
);
CREATE INDEX event_of_thing ON event (thing, thing_id, id);
CREATE INDEX event_of_actor ON event (actor_id, id);
CREATE TRIGGER event_is_append_only BEFORE UPDATE OR DELETE ON event FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER event_is_kept BEFORE TRUNCATE ON event FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();

-- rate-limiter-flexible's store, shared by every process.
CREATE TABLE rate_limit (key varchar(255) PRIMARY KEY, points integer NOT NULL DEFAULT 0, expire bigint);
CREATE INDEX rate_limit_expire ON rate_limit (expire);
