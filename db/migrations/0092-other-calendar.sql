-- The address of a sawyer's other calendar, which is read again by itself. It is often a secret, so it is kept sealed; `host` is for showing.
CREATE TABLE other_calendar (
  sawyer_id uuid PRIMARY KEY REFERENCES account,
  address_sealed text NOT NULL,
  host text NOT NULL,
  least_hours integer NOT NULL CHECK (least_hours BETWEEN 0 AND 24),
  made_at timestamptz NOT NULL,
  read_at timestamptz NOT NULL,
  read_next timestamptz NOT NULL,
  failures integer NOT NULL DEFAULT 0 CHECK (failures >= 0),
  failed_because text
);
CREATE INDEX other_calendar_to_read ON other_calendar (read_next);
