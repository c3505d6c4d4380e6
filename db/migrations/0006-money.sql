CREATE TABLE held_payment (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL UNIQUE REFERENCES booking,
  status text NOT NULL DEFAULT 'due' CHECK (status IN ('due', 'held', 'settling', 'settled', 'refunded', 'void')),
  due_cents integer NOT NULL CHECK (due_cents > 0),
  transfer_group text NOT NULL UNIQUE,
  disputed_at timestamptz,
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL
);

-- One live checkout per payment; the old one expires at the provider before a new one is made.
CREATE TABLE checkout (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  payment_id uuid NOT NULL REFERENCES held_payment,
  purpose text NOT NULL CHECK (purpose IN ('hold', 'top-up', 'increase')),
  amount_cents integer NOT NULL CHECK (amount_cents > 0),
  status text NOT NULL DEFAULT 'creating' CHECK (status IN ('creating', 'open', 'complete', 'expired')),
  provider_session_id text UNIQUE,
  url text,
  idempotency_key text NOT NULL UNIQUE,
  expires_at timestamptz NOT NULL,
  created_at timestamptz NOT NULL,
  completed_at timestamptz
);
CREATE UNIQUE INDEX one_live_checkout ON checkout (payment_id) WHERE status IN ('creating', 'open');

CREATE TABLE charge (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  payment_id uuid NOT NULL REFERENCES held_payment,
  checkout_id uuid UNIQUE REFERENCES checkout,
  provider_charge_id text NOT NULL UNIQUE,
  provider_intent_id text NOT NULL UNIQUE,
  amount_cents integer NOT NULL CHECK (amount_cents > 0),
  received_at timestamptz NOT NULL
);

-- The outbox: calls to the provider are written here in the transaction that decides them and made by the worker afterwards,
-- under our own stored idempotency key.
CREATE TABLE provider_call (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  kind text NOT NULL CHECK (kind IN ('transfer', 'refund', 'reversal', 'expire-checkout')),
  booking_id uuid REFERENCES booking,
  payment_id uuid REFERENCES held_payment,
  charge_id uuid REFERENCES charge,
  idempotency_key text NOT NULL UNIQUE,
  request jsonb NOT NULL,
  status text NOT NULL DEFAULT 'waiting' CHECK (status IN ('waiting', 'done', 'failed', 'stuck')),
  attempts integer NOT NULL DEFAULT 0,
  provider_id text UNIQUE,
  response jsonb,
  error text,
  created_at timestamptz NOT NULL,
  done_at timestamptz
);
CREATE INDEX provider_call_waiting ON provider_call (created_at) WHERE status IN ('waiting', 'failed', 'stuck');

CREATE TABLE provider_event (
  id text PRIMARY KEY,
  type text NOT NULL,
  created_at timestamptz NOT NULL,
  received_at timestamptz NOT NULL,
  handled_at timestamptz,
  payload jsonb NOT NULL,
  outcome text
);

CREATE TABLE ledger_group (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  at timestamptz NOT NULL,
  cause text NOT NULL,
  cause_id text NOT NULL,
  booking_id uuid REFERENCES booking,
  actor_id uuid REFERENCES account,
  note text NOT NULL DEFAULT '',
  UNIQUE (cause, cause_id)
);

CREATE TABLE ledger_entry (
  id bigint GENERATED ALWAYS AS IDENTITY PRIMARY KEY,
  group_id uuid NOT NULL REFERENCES ledger_group,
  account text NOT NULL CHECK (account IN ('provider balance', 'landowner held', 'sawyer payable', 'refund payable',
    'platform fee', 'provider fee', 'sawyer receivable', 'dispute loss')),
  booking_id uuid REFERENCES booking,
  amount_cents integer NOT NULL CHECK (amount_cents <> 0),
  currency text NOT NULL DEFAULT 'usd' CHECK (currency = 'usd')
);
CREATE INDEX ledger_entry_of_group ON ledger_entry (group_id);
CREATE INDEX ledger_entry_of_booking ON ledger_entry (booking_id, account);

CREATE TRIGGER ledger_group_is_append_only BEFORE UPDATE OR DELETE ON ledger_group FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER ledger_entry_is_append_only BEFORE UPDATE OR DELETE ON ledger_entry FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER ledger_group_is_kept BEFORE TRUNCATE ON ledger_group FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
CREATE TRIGGER ledger_entry_is_kept BEFORE TRUNCATE ON ledger_entry FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();

CREATE FUNCTION ledger_group_sums_to_zero() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF EXISTS (SELECT 1 FROM ledger_entry WHERE group_id = NEW.group_id GROUP BY currency HAVING sum(amount_cents) <> 0) THEN
    RAISE EXCEPTION 'ledger group % does not sum to zero', NEW.group_id USING ERRCODE = 'check_violation';
  END IF;
  RETURN NULL;
END $$;
CREATE CONSTRAINT TRIGGER ledger_balances AFTER INSERT ON ledger_entry DEFERRABLE INITIALLY DEFERRED
  FOR EACH ROW EXECUTE FUNCTION ledger_group_sums_to_zero();
