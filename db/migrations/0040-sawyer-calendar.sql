-- A day off may come from a calendar that the sawyer brought; bringing it again replaces those days. What it said of them is not kept.
ALTER TABLE day_off ADD COLUMN source text NOT NULL DEFAULT 'own' CHECK (source IN ('own', 'imported'));

-- The secret in a feed's address: the hash finds the row, the sealed text shows the address to its owner again.
CREATE TABLE calendar_feed (
  sawyer_id uuid PRIMARY KEY REFERENCES account,
  secret_hash text NOT NULL UNIQUE,
  secret_sealed text NOT NULL,
  made_at timestamptz NOT NULL
);
