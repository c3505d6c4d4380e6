-- Cells of level 10 instead of 9: tiles of zoom 7 over a dense country took long too. What is kept is counted anew.
CREATE OR REPLACE FUNCTION note_map_listed() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  INSERT INTO map_changed (cell) SELECT DISTINCT (map_cell >> 32)::integer FROM listed WHERE status = 'open' AND hidden_at IS NULL AND map_cell IS NOT NULL;
  RETURN NULL;
END $$;

CREATE OR REPLACE FUNCTION note_map_relisted() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  INSERT INTO map_changed (cell)
    SELECT DISTINCT (side.cell >> 32)::integer
    FROM unlisted o JOIN listed n USING (id), LATERAL (VALUES (o.map_cell), (n.map_cell)) side (cell)
    WHERE side.cell IS NOT NULL AND (o.status = 'open' OR n.status = 'open')
      AND (o.status, o.hidden_at, o.map_cell, o.closes_at, o.largest_end_ob_in) IS DISTINCT FROM (n.status, n.hidden_at, n.map_cell, n.closes_at, n.largest_end_ob_in);
  RETURN NULL;
END $$;

TRUNCATE map_count, map_changed;
INSERT INTO map_changed (cell) SELECT DISTINCT (map_cell >> 32)::integer FROM listing WHERE status = 'open' AND hidden_at IS NULL AND map_cell IS NOT NULL;
