-- Logs measured again on the day. `agreed_at`: the landowner's word for exactly these measures; measuring anew takes it away.
CREATE TABLE measured_log (
  booking_id uuid NOT NULL REFERENCES booking,
  log_id uuid NOT NULL REFERENCES log,
  small_end_in double precision NOT NULL CHECK (small_end_in BETWEEN 4 AND 60),
  large_end_in double precision CHECK (large_end_in >= small_end_in),
  length_ft double precision NOT NULL CHECK (length_ft BETWEEN 4 AND 40),
  measured_at timestamptz NOT NULL,
  agreed_at timestamptz,
  PRIMARY KEY (booking_id, log_id)
);

-- What the landowner allowed on the day, signed by name and finger: more metal hits, a higher limit than the hold, a log larger than
-- listed, a log added, another set-up. Nothing is ever taken back or changed here. `limit_cents` is the whole limit, not what is added.
CREATE TABLE day_allowance (
  id uuid PRIMARY KEY,
  booking_id uuid NOT NULL REFERENCES booking,
  what text NOT NULL CHECK (what IN ('metal', 'increase', 'larger-log', 'added-log', 'set-up-again')),
  log_id uuid REFERENCES log,
  limit_cents integer CHECK (limit_cents > 0),
  signed_name text NOT NULL CHECK (signed_name <> ''),
  signature text,
  on_phone_of text NOT NULL CHECK (on_phone_of IN ('landowner', 'sawyer')),
  entered_by uuid NOT NULL REFERENCES account,
  entered_at timestamptz NOT NULL,
  CHECK ((what = 'increase') = (limit_cents IS NOT NULL)),
  CHECK ((what IN ('larger-log', 'added-log')) = (log_id IS NOT NULL)),
  CHECK (on_phone_of = 'landowner' OR signature IS NOT NULL)
);
CREATE INDEX day_allowance_of_booking ON day_allowance (booking_id, entered_at);

-- A tally signed for part of the work, when rain stops the saw: its lines stand from then on.
CREATE TABLE tally_part (
  id uuid PRIMARY KEY,
  tally_id uuid NOT NULL REFERENCES tally,
  line_ids uuid[] NOT NULL,
  content_sha256 text NOT NULL,
  cost_cents integer NOT NULL CHECK (cost_cents >= 0),
  signed_name text NOT NULL CHECK (signed_name <> ''),
  signature text,
  on_phone_of text NOT NULL CHECK (on_phone_of IN ('landowner', 'sawyer')),
  signed_at timestamptz NOT NULL
);
CREATE INDEX tally_part_of_tally ON tally_part (tally_id, signed_at);

-- The landowner's code for signing on the sawyer's phone. Five wrong ones shut it: then only the landowner's own account signs.
CREATE TABLE signing_code (
  booking_id uuid PRIMARY KEY REFERENCES booking,
  code text NOT NULL CHECK (code ~ '^[0-9]{6}$'),
  wrong_tries integer NOT NULL DEFAULT 0
);

ALTER TABLE tally ADD COLUMN hold_warned text NOT NULL DEFAULT 'none' CHECK (hold_warned IN ('none', 'at-80', 'at-95', 'stop'));
ALTER TABLE tally ADD COLUMN signed_on text CHECK (signed_on IN ('landowner', 'sawyer'));
