-- Messages that a sawyer keeps ready for bids.
CREATE TABLE ready_message (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  sawyer_id uuid NOT NULL REFERENCES account,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 60),
  body text NOT NULL CHECK (length(body) BETWEEN 1 AND 2000),
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL
);
CREATE INDEX ready_message_of_sawyer ON ready_message (sawyer_id, name);
