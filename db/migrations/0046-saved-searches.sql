-- What a sawyer asked to be told of. `origin` is where distances are measured from: a ZIP code's middle or a point of the map.
CREATE TABLE saved_search (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  sawyer_id uuid NOT NULL REFERENCES account,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  tells text NOT NULL CHECK (tells IN ('at-once', 'daily', 'stopped')),
  zip char(5),
  origin geography(Point, 4326),
  radius_mi double precision CHECK (radius_mi BETWEEN 1 AND 500),
  species text,
  min_board_feet double precision,
  max_largest_end_in double precision,
  closing boolean NOT NULL DEFAULT false,
  fits boolean NOT NULL DEFAULT false,
  min_per_hour_cents integer CHECK (min_per_hour_cents >= 0),
  -- The sawyer's own calendar day of the last daily letter.
  told_on date,
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL,
  CHECK ((origin IS NULL) = (radius_mi IS NULL))
);
CREATE INDEX saved_search_of_sawyer ON saved_search (sawyer_id, created_at);
CREATE INDEX saved_search_near ON saved_search USING gist (origin) WHERE tells <> 'stopped';
CREATE INDEX saved_search_everywhere ON saved_search (id) WHERE tells <> 'stopped' AND origin IS NULL;

-- A listing found for a sawyer: once ever, whichever of the searches found it. Untold until the letter is written.
CREATE TABLE found_listing (
  sawyer_id uuid NOT NULL REFERENCES account,
  listing_id uuid NOT NULL REFERENCES listing,
  search_id uuid REFERENCES saved_search ON DELETE SET NULL,
  found_at timestamptz NOT NULL,
  told_at timestamptz,
  PRIMARY KEY (sawyer_id, listing_id)
);
CREATE INDEX found_listing_untold ON found_listing (search_id) WHERE told_at IS NULL;
