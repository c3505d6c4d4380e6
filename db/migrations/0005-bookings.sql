CREATE TABLE outing (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  sawyer_id uuid NOT NULL REFERENCES account,
  kind text NOT NULL CHECK (kind IN ('booking', 'shared-trip')),
  created_at timestamptz NOT NULL
);

CREATE TABLE booking (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  number integer NOT NULL GENERATED ALWAYS AS IDENTITY (START WITH 5001) UNIQUE,
  listing_id uuid NOT NULL REFERENCES listing,
  bid_id uuid NOT NULL UNIQUE REFERENCES bid,
  landowner_id uuid NOT NULL REFERENCES account,
  sawyer_id uuid NOT NULL REFERENCES account,
  outing_id uuid NOT NULL REFERENCES outing,
  status text NOT NULL DEFAULT 'proposed'
    CHECK (status IN ('proposed', 'agreed', 'held', 'sawing', 'tallied', 'queried', 'signed', 'settled', 'lapsed', 'cancelled')),
  time_zone text NOT NULL,
  starts_at timestamptz,
  pay_by timestamptz,
  sign_by timestamptz,
  invitation_sequence integer NOT NULL DEFAULT 0,
  cancelled_by uuid REFERENCES account,
  cancel_reason text,
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL,
  CHECK (landowner_id <> sawyer_id),
  CHECK (status IN ('proposed', 'lapsed', 'cancelled') OR starts_at IS NOT NULL)
);
CREATE UNIQUE INDEX one_live_booking_per_listing ON booking (listing_id) WHERE status NOT IN ('lapsed', 'cancelled');
CREATE INDEX booking_of_landowner ON booking (landowner_id, updated_at DESC);
CREATE INDEX booking_of_sawyer ON booking (sawyer_id, updated_at DESC);
CREATE INDEX booking_to_pay ON booking (pay_by) WHERE status = 'agreed';
CREATE INDEX booking_to_sign ON booking (sign_by) WHERE status = 'tallied';

CREATE TABLE day_proposal (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  proposed_by uuid NOT NULL REFERENCES account,
  days date[] NOT NULL CHECK (cardinality(days) BETWEEN 1 AND 10),
  start_time time NOT NULL DEFAULT '08:00',
  note text NOT NULL DEFAULT '',
  status text NOT NULL DEFAULT 'open' CHECK (status IN ('open', 'confirmed', 'replaced', 'withdrawn')),
  created_at timestamptz NOT NULL,
  decided_at timestamptz
);
CREATE UNIQUE INDEX one_open_day_proposal ON day_proposal (booking_id) WHERE status = 'open';

-- A sawyer's day belongs to one outing: the database has the last word.
CREATE TABLE booked_day (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  sawyer_id uuid NOT NULL REFERENCES account,
  day date NOT NULL CHECK (isfinite(day)),
  outing_id uuid NOT NULL REFERENCES outing,
  booking_id uuid NOT NULL REFERENCES booking,
  active boolean NOT NULL DEFAULT true,
  CONSTRAINT one_outing_a_day EXCLUDE USING gist (sawyer_id WITH =, day WITH =, outing_id WITH <>) WHERE (active)
);
CREATE UNIQUE INDEX booked_once ON booked_day (booking_id, day) WHERE active;

-- The terms as both sides read them, frozen when the bid was chosen.
CREATE TABLE work_agreement (
  booking_id uuid PRIMARY KEY REFERENCES booking,
  text_version text NOT NULL,
  terms jsonb NOT NULL,
  sha256 text NOT NULL,
  frozen_at timestamptz NOT NULL
);
CREATE TRIGGER agreement_is_frozen BEFORE UPDATE OR DELETE ON work_agreement FOR EACH ROW EXECUTE FUNCTION refuse_change();

-- A conversation belongs to a listing and one sawyer; once booked, the same conversation goes on.
CREATE TABLE conversation (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  listing_id uuid NOT NULL REFERENCES listing,
  landowner_id uuid NOT NULL REFERENCES account,
  sawyer_id uuid NOT NULL REFERENCES account,
  booking_id uuid REFERENCES booking,
  last_message_at timestamptz NOT NULL,
  UNIQUE (listing_id, sawyer_id)
);

CREATE TABLE message (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  conversation_id uuid NOT NULL REFERENCES conversation,
  sender_id uuid NOT NULL REFERENCES account,
  recipient_id uuid NOT NULL REFERENCES account,
  body text NOT NULL CHECK (length(body) BETWEEN 1 AND 4000),
  sent_at timestamptz NOT NULL,
  read_at timestamptz,
  hidden_at timestamptz
);
CREATE INDEX message_of_conversation ON message (conversation_id, sent_at);
CREATE INDEX message_unread ON message (recipient_id) WHERE read_at IS NULL;

CREATE TABLE review (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  author_id uuid NOT NULL REFERENCES account,
  subject_id uuid NOT NULL REFERENCES account,
  stars integer NOT NULL CHECK (stars BETWEEN 1 AND 5),
  body text NOT NULL DEFAULT '',
  created_at timestamptz NOT NULL,
  hidden_at timestamptz,
  UNIQUE (booking_id, author_id)
);
CREATE INDEX review_of_subject ON review (subject_id, created_at DESC);
