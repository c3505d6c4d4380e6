-- What a moderator sets right by hand, with the reason. Above $500 a second moderator approves: the database has the last word.
CREATE TABLE adjustment (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  kind text NOT NULL CHECK (kind IN ('forgive', 'fee-to-landowner', 'fee-to-sawyer', 'hold-to-landowner', 'enter-difference')),
  booking_id uuid REFERENCES booking,
  -- The provider's object, and the account that the other side of the entry goes to, for a difference that is entered.
  object text,
  against text CHECK (against IN ('platform fee', 'provider fee', 'dispute loss')),
  amount_cents integer NOT NULL CHECK (amount_cents <> 0),
  reason text NOT NULL CHECK (reason <> ''),
  status text NOT NULL DEFAULT 'asked' CHECK (status IN ('asked', 'done', 'refused')),
  asked_by uuid NOT NULL REFERENCES account,
  asked_at timestamptz NOT NULL,
  decided_by uuid REFERENCES account,
  decided_at timestamptz,
  CHECK ((status = 'asked') = (decided_at IS NULL)),
  CHECK ((kind = 'enter-difference') = (object IS NOT NULL AND against IS NOT NULL)),
  CHECK (kind = 'enter-difference' OR booking_id IS NOT NULL),
  CONSTRAINT four_eyes CHECK (status <> 'done' OR abs(amount_cents) <= 50000 OR decided_by <> asked_by)
);
CREATE INDEX adjustment_newest ON adjustment (asked_at DESC);
CREATE INDEX adjustment_asked ON adjustment (asked_at) WHERE status = 'asked';
