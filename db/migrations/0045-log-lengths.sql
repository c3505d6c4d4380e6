-- The shortest and longest log of a listing beside it, so that fitting a mill is asked of one row. Kept by the database itself,
-- whoever writes the logs.
ALTER TABLE listing ADD COLUMN shortest_log_ft double precision NOT NULL DEFAULT 0, ADD COLUMN longest_log_ft double precision NOT NULL DEFAULT 0;

CREATE FUNCTION keep_log_lengths() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  changed uuid := CASE TG_OP WHEN 'DELETE' THEN OLD.listing_id ELSE NEW.listing_id END;
BEGIN
  UPDATE listing SET shortest_log_ft = lengths.shortest, longest_log_ft = lengths.longest
  FROM (SELECT coalesce(min(length_ft), 0) AS shortest, coalesce(max(length_ft), 0) AS longest FROM log
        WHERE listing_id = changed AND removed_at IS NULL AND NOT added_on_the_day) lengths
  WHERE id = changed AND (shortest_log_ft, longest_log_ft) IS DISTINCT FROM (lengths.shortest, lengths.longest);
  RETURN NULL;
END $$;
CREATE TRIGGER log_lengths_are_kept AFTER INSERT OR DELETE OR UPDATE OF length_ft, removed_at, added_on_the_day, listing_id ON log
  FOR EACH ROW EXECUTE FUNCTION keep_log_lengths();

UPDATE listing SET shortest_log_ft = lengths.shortest, longest_log_ft = lengths.longest
FROM (SELECT listing_id, min(length_ft) AS shortest, max(length_ft) AS longest FROM log WHERE removed_at IS NULL AND NOT added_on_the_day GROUP BY listing_id) lengths
WHERE listing.id = lengths.listing_id;
