-- One tally a part: a job stopped by rain has a second part. Ids of boards, hits and culls are made where they are typed, so that
-- a repeated send adds nothing.
CREATE TABLE tally (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  part integer NOT NULL DEFAULT 1 CHECK (part >= 1),
  revision integer NOT NULL DEFAULT 0,
  clock jsonb NOT NULL DEFAULT '[]',
  extras jsonb NOT NULL DEFAULT '{}',
  note text NOT NULL DEFAULT '',
  created_at timestamptz NOT NULL,
  offered_at timestamptz,
  content_sha256 text,
  signed_at timestamptz,
  signed_by text CHECK (signed_by IN ('landowner', 'deadline', 'moderator')),
  signed_name text,
  signature text,
  settlement jsonb,
  UNIQUE (booking_id, part)
);

CREATE TABLE tally_board (
  id uuid PRIMARY KEY,
  tally_id uuid NOT NULL REFERENCES tally,
  log_id uuid REFERENCES log,
  kind text NOT NULL DEFAULT 'board' CHECK (kind IN ('board', 'slab', 'out-of-size')),
  thickness_in double precision NOT NULL CHECK (thickness_in > 0),
  width_in double precision NOT NULL CHECK (width_in > 0),
  second_width_in double precision,
  length_ft double precision NOT NULL CHECK (length_ft > 0),
  count integer NOT NULL CHECK (count > 0),
  entered_at timestamptz NOT NULL,
  sequence integer NOT NULL,
  removed_at timestamptz
);
CREATE INDEX tally_board_of_tally ON tally_board (tally_id, sequence);

CREATE TABLE metal_hit (
  id uuid PRIMARY KEY,
  tally_id uuid NOT NULL REFERENCES tally,
  log_id uuid REFERENCES log,
  outcome text NOT NULL CHECK (outcome IN ('re-sharpened', 'destroyed')),
  note text NOT NULL DEFAULT '',
  entered_at timestamptz NOT NULL,
  removed_at timestamptz
);

CREATE TABLE cull_log (
  id uuid PRIMARY KEY,
  tally_id uuid NOT NULL REFERENCES tally,
  log_id uuid REFERENCES log,
  reason text NOT NULL,
  opening_minutes integer NOT NULL DEFAULT 0 CHECK (opening_minutes >= 0),
  entered_at timestamptz NOT NULL,
  removed_at timestamptz
);

-- A query names a line of the tally; the sawyer answers it, the landowner accepts, or a moderator decides with a reason.
CREATE TABLE tally_query (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  tally_id uuid NOT NULL REFERENCES tally,
  line text NOT NULL,
  line_id uuid,
  says text NOT NULL,
  wanted jsonb,
  answer text,
  answered jsonb,
  decision jsonb,
  decided_because text,
  decided_by uuid REFERENCES account,
  created_at timestamptz NOT NULL,
  answered_at timestamptz,
  decided_at timestamptz
);
CREATE INDEX tally_query_of_tally ON tally_query (tally_id);
