-- How many open listings lie in each cell of the map at level 9 (2^9 columns and rows), for tiles of low zooms that nobody filters.
-- The worker counts again what has changed; until then a tile counts the cells of `map_changed` itself, so that it is never behind.
CREATE TABLE map_count (
  cell integer PRIMARY KEY,
  listings integer NOT NULL CHECK (listings > 0),
  largest_end_ob_in double precision NOT NULL,
  -- Of a single listing, its number.
  least_number integer NOT NULL,
  sum_x bigint NOT NULL,
  sum_y bigint NOT NULL
);

-- A row for each change, never updated: publishing waits for nobody else who publishes in the same place.
CREATE TABLE map_changed (id bigint GENERATED ALWAYS AS IDENTITY PRIMARY KEY, cell integer NOT NULL);
CREATE INDEX map_changed_cell ON map_changed (cell);

CREATE FUNCTION note_map_listed() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  INSERT INTO map_changed (cell) SELECT DISTINCT (map_cell >> 34)::integer FROM listed WHERE status = 'open' AND hidden_at IS NULL AND map_cell IS NOT NULL;
  RETURN NULL;
END $$;

CREATE FUNCTION note_map_relisted() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  INSERT INTO map_changed (cell)
    SELECT DISTINCT (side.cell >> 34)::integer
    FROM unlisted o JOIN listed n USING (id), LATERAL (VALUES (o.map_cell), (n.map_cell)) side (cell)
    WHERE side.cell IS NOT NULL AND (o.status = 'open' OR n.status = 'open')
      AND (o.status, o.hidden_at, o.map_cell, o.closes_at, o.largest_end_ob_in) IS DISTINCT FROM (n.status, n.hidden_at, n.map_cell, n.closes_at, n.largest_end_ob_in);
  RETURN NULL;
END $$;

CREATE TRIGGER map_listed AFTER INSERT ON listing REFERENCING NEW TABLE AS listed FOR EACH STATEMENT EXECUTE FUNCTION note_map_listed();
CREATE TRIGGER map_relisted AFTER UPDATE ON listing REFERENCING OLD TABLE AS unlisted NEW TABLE AS listed FOR EACH STATEMENT EXECUTE FUNCTION note_map_relisted();
CREATE TRIGGER map_unlisted AFTER DELETE ON listing REFERENCING OLD TABLE AS listed FOR EACH STATEMENT EXECUTE FUNCTION note_map_listed();

INSERT INTO map_changed (cell) SELECT DISTINCT (map_cell >> 34)::integer FROM listing WHERE status = 'open' AND hidden_at IS NULL AND map_cell IS NOT NULL;
