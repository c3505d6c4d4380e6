-- A landowner's notice of boards that a settled job left over: no payment, only a word about what is asked. One stands at a time.
CREATE TABLE boards_left (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  booking_id uuid NOT NULL REFERENCES booking,
  listing_id uuid NOT NULL REFERENCES listing,
  boards jsonb NOT NULL,
  asks text NOT NULL DEFAULT '' CHECK (length(asks) <= 200),
  put_up_at timestamptz NOT NULL,
  taken_down_at timestamptz
);
CREATE UNIQUE INDEX boards_left_standing ON boards_left (booking_id) WHERE taken_down_at IS NULL;
CREATE INDEX boards_left_of_listing ON boards_left (listing_id) WHERE taken_down_at IS NULL;

-- A page of the job to show around. Everyone may read it while both sides agree to it as it stands; either takes that back at any time.
CREATE TABLE job_page (
  booking_id uuid PRIMARY KEY REFERENCES booking,
  photo_ids uuid[] NOT NULL DEFAULT '{}',
  words text NOT NULL DEFAULT '' CHECK (length(words) <= 2000),
  landowner_agreed_at timestamptz,
  sawyer_agreed_at timestamptz,
  updated_at timestamptz NOT NULL
);
