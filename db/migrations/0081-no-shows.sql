-- One side says that the other did not come. Unanswered or agreed it stands; contested, a moderator decides.
CREATE TABLE no_show (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  absent text NOT NULL CHECK (absent IN ('landowner', 'sawyer')),
  -- The start of the day it is about: when the work is moved, the report is over.
  starts_at timestamptz NOT NULL,
  says text NOT NULL,
  status text NOT NULL DEFAULT 'reported' CHECK (status IN ('reported', 'contested', 'stands', 'dismissed', 'over')),
  reported_at timestamptz NOT NULL,
  answer_by timestamptz NOT NULL,
  answer text,
  answered_at timestamptz,
  decided_by uuid REFERENCES account,
  because text,
  decided_at timestamptz
);
CREATE UNIQUE INDEX one_open_no_show ON no_show (booking_id) WHERE status IN ('reported', 'contested');

-- How often the sawyer was reminded that this pay waits for a payout account.
ALTER TABLE provider_call ADD COLUMN reminders integer NOT NULL DEFAULT 0;
