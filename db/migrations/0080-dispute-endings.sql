-- When a booking was cancelled: what is owed is reckoned from this instant, also when a dispute has to be waited out first.
ALTER TABLE booking ADD COLUMN cancelled_at timestamptz;
UPDATE booking SET cancelled_at = updated_at WHERE status = 'cancelled';

-- A call is dropped when the bank has given its money back to the card in the meantime.
ALTER TABLE provider_call DROP CONSTRAINT provider_call_status_check;
ALTER TABLE provider_call ADD CONSTRAINT provider_call_status_check CHECK (status IN ('waiting', 'done', 'failed', 'stuck', 'dropped'));

-- The transfer that a reversal takes back.
ALTER TABLE provider_call ADD COLUMN reverses uuid REFERENCES provider_call;
ALTER TABLE provider_call ADD CONSTRAINT a_reversal_names_its_transfer CHECK ((kind = 'reversal') = (reverses IS NOT NULL));
CREATE UNIQUE INDEX one_reversal_per_transfer ON provider_call (reverses);
