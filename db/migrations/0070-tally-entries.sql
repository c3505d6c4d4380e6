-- Entries that have no row of their own to be known again by (extras, measures, the start) are known by the id they were made with,
-- so that a repeated send does nothing and an old one never undoes a newer.
CREATE TABLE tally_entry (
  id uuid PRIMARY KEY,
  booking_id uuid NOT NULL REFERENCES booking,
  kind text NOT NULL,
  entered_by uuid NOT NULL REFERENCES account,
  entered_at timestamptz NOT NULL
);
CREATE INDEX tally_entry_of_booking ON tally_entry (booking_id, entered_at);
