-- What the landowner keeps of the boards after the job: the air they dry in, the stack, the project, when to be reminded.
CREATE TABLE drying_plan (
  booking_id uuid PRIMARY KEY REFERENCES booking,
  temperature_f double precision NOT NULL CHECK (temperature_f BETWEEN -20 AND 120),
  humidity_pct double precision NOT NULL CHECK (humidity_pct BETWEEN 1 AND 99),
  target_pct double precision NOT NULL CHECK (target_pct BETWEEN 4 AND 25),
  stack_width_ft double precision NOT NULL CHECK (stack_width_ft BETWEEN 1 AND 12),
  saw_kerf_in double precision NOT NULL CHECK (saw_kerf_in BETWEEN 0 AND 1),
  pieces text NOT NULL DEFAULT '',
  remind_on date,
  reminded_at timestamptz,
  updated_at timestamptz NOT NULL
);
CREATE INDEX drying_plan_to_remind ON drying_plan (remind_on) WHERE remind_on IS NOT NULL AND reminded_at IS NULL;

CREATE TABLE moisture_reading (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  read_on date NOT NULL,
  moisture_pct double precision NOT NULL CHECK (moisture_pct BETWEEN 3 AND 200),
  note text NOT NULL DEFAULT '',
  entered_by uuid NOT NULL REFERENCES account,
  entered_at timestamptz NOT NULL
);
CREATE INDEX moisture_reading_of_booking ON moisture_reading (booking_id, read_on);
