-- A worker claims a call for a minute, so that two never make it side by side.
ALTER TABLE provider_call ADD COLUMN claimed_until timestamptz;

-- The sawyer takes the held amount as full pay although the tally came to more.
ALTER TABLE held_payment ADD COLUMN held_accepted_at timestamptz;

-- Money that arrived when it was no longer due: it goes back whole and is never part of the hold.
ALTER TABLE charge ADD COLUMN returned_because text;

ALTER TABLE provider_event ADD COLUMN account text;
CREATE INDEX provider_event_unhandled ON provider_event (received_at) WHERE handled_at IS NULL;

CREATE TABLE card_dispute (
  id text PRIMARY KEY,
  charge_id uuid NOT NULL REFERENCES charge,
  booking_id uuid NOT NULL REFERENCES booking,
  amount_cents integer NOT NULL CHECK (amount_cents > 0),
  status text NOT NULL DEFAULT 'open' CHECK (status IN ('open', 'won', 'lost')),
  opened_at timestamptz NOT NULL,
  closed_at timestamptz,
  CHECK ((status = 'open') = (closed_at IS NULL))
);
CREATE INDEX card_dispute_of_booking ON card_dispute (booking_id);

-- What a comparison with the provider's books found. A difference names its booking where it has one.
CREATE TABLE reconciliation (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  began_at timestamptz NOT NULL,
  finished_at timestamptz,
  ledger_cents integer,
  provider_cents integer,
  repaired jsonb NOT NULL DEFAULT '[]',
  differences jsonb NOT NULL DEFAULT '[]'
);
CREATE INDEX reconciliation_newest ON reconciliation (began_at DESC);
