-- Busy days of a sawyer's other calendars stand apart from the days off that the sawyer took, each with the calendar it came from.
-- One that is given back stays known, so that reading the calendar again does not take it once more.
CREATE TABLE busy_day (
  sawyer_id uuid NOT NULL REFERENCES account,
  day date NOT NULL,
  brought_by text NOT NULL CHECK (brought_by IN ('address', 'file')),
  -- The host of the address or the name of the file: what the sawyer knows the calendar by.
  calendar text NOT NULL,
  given_back_at timestamptz,
  PRIMARY KEY (sawyer_id, day, brought_by)
);

INSERT INTO busy_day (sawyer_id, day, brought_by, calendar)
  SELECT off.sawyer_id, off.day, CASE WHEN other.sawyer_id IS NULL THEN 'file' ELSE 'address' END, coalesce(other.host, 'a calendar file')
  FROM day_off off LEFT JOIN other_calendar other ON other.sawyer_id = off.sawyer_id WHERE off.source = 'imported';
DELETE FROM day_off WHERE source = 'imported';
ALTER TABLE day_off DROP COLUMN source;

-- Every day that a sawyer does not saw on, whoever said so.
CREATE VIEW sawyer_off AS
  SELECT sawyer_id, day FROM day_off
  UNION SELECT sawyer_id, day FROM busy_day WHERE given_back_at IS NULL;
