-- `base` is already snapped to the coarse grid: the exact address of a sawyer is never stored.
CREATE TABLE sawyer_profile (
  account_id uuid PRIMARY KEY REFERENCES account,
  business_name text NOT NULL DEFAULT '',
  about text NOT NULL DEFAULT '',
  zip char(5),
  town text,
  state char(2),
  time_zone text,
  base geography(Point, 4326),
  travel_miles integer NOT NULL DEFAULT 50 CHECK (travel_miles BETWEEN 1 AND 500),
  services text[] NOT NULL DEFAULT '{}',
  languages text[] NOT NULL DEFAULT '{}',
  working_days integer[] NOT NULL DEFAULT '{1,2,3,4,5,6}',
  notice_days integer NOT NULL DEFAULT 2 CHECK (notice_days BETWEEN 0 AND 60),
  certificate_key text,
  certificate_seen_at timestamptz,
  certificate_expires_on date,
  payout_account text UNIQUE,
  payouts_ready boolean NOT NULL DEFAULT false,
  updated_at timestamptz NOT NULL
);
CREATE INDEX sawyer_near ON sawyer_profile USING gist (base);

CREATE TABLE day_off (
  sawyer_id uuid NOT NULL REFERENCES account,
  day date NOT NULL,
  PRIMARY KEY (sawyer_id, day)
);

-- The five limits of a mill, in inches and feet; kerf is the measured width of the cut.
CREATE TABLE mill (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  sawyer_id uuid NOT NULL REFERENCES account,
  name text NOT NULL,
  kind text NOT NULL CHECK (kind IN ('band', 'swing-blade', 'chainsaw', 'circular')),
  kerf_in double precision NOT NULL CHECK (kerf_in > 0 AND kerf_in <= 1),
  largest_log_in double precision NOT NULL CHECK (largest_log_in > 0),
  widest_cut_in double precision NOT NULL CHECK (widest_cut_in > 0),
  widest_board_in double precision NOT NULL CHECK (widest_board_in > 0),
  longest_ft double precision NOT NULL CHECK (longest_ft > 0),
  shortest_ft double precision NOT NULL CHECK (shortest_ft > 0 AND shortest_ft <= longest_ft),
  pace_bf_per_hour integer NOT NULL CHECK (pace_bf_per_hour BETWEEN 10 AND 5000),
  turns_logs_by text NOT NULL CHECK (turns_logs_by IN ('machine', 'hand')),
  realised_yield double precision NOT NULL DEFAULT 0.85 CHECK (realised_yield > 0 AND realised_yield <= 1.5),
  yield_jobs integer NOT NULL DEFAULT 0,
  created_at timestamptz NOT NULL,
  retired_at timestamptz
);
CREATE INDEX mill_of_sawyer ON mill (sawyer_id) WHERE retired_at IS NULL;

-- Append only in practice: a new revision for each change, so that what a bid froze can be found again.
CREATE TABLE rate_card (
  sawyer_id uuid NOT NULL REFERENCES account,
  revision integer NOT NULL CHECK (revision >= 1),
  card jsonb NOT NULL,
  created_at timestamptz NOT NULL,
  PRIMARY KEY (sawyer_id, revision)
);

-- `mill`, `card` and `estimate` are frozen copies: a bid is worked out once and then stands.
CREATE TABLE bid (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  listing_id uuid NOT NULL REFERENCES listing,
  listing_revision integer NOT NULL,
  sawyer_id uuid NOT NULL REFERENCES account,
  mill_id uuid NOT NULL REFERENCES mill,
  status text NOT NULL DEFAULT 'open'
    CHECK (status IN ('open', 'toConfirm', 'chosen', 'declined', 'withdrawn', 'lapsed', 'released')),
  mill jsonb NOT NULL,
  card jsonb NOT NULL,
  estimate jsonb NOT NULL,
  road_miles double precision NOT NULL CHECK (road_miles >= 0),
  expected_bf_hundredths integer NOT NULL CHECK (expected_bf_hundredths >= 0),
  expected_by text NOT NULL,
  override_reason text,
  expected_cents integer NOT NULL CHECK (expected_cents >= 0),
  low_cents integer NOT NULL CHECK (low_cents >= 0),
  high_cents integer NOT NULL CHECK (high_cents >= low_cents),
  hold_cents integer NOT NULL CHECK (hold_cents >= 0),
  metal_cap_cents integer NOT NULL DEFAULT 0 CHECK (metal_cap_cents >= 0),
  off_bearer text NOT NULL CHECK (off_bearer IN ('sawyer-brings', 'landowner-provides')),
  days_offered date[] NOT NULL DEFAULT '{}',
  message text NOT NULL DEFAULT '',
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL,
  decided_at timestamptz
);
CREATE UNIQUE INDEX one_live_bid_per_sawyer ON bid (listing_id, sawyer_id) WHERE status IN ('open', 'toConfirm', 'chosen');
CREATE UNIQUE INDEX one_chosen_bid_per_listing ON bid (listing_id) WHERE status = 'chosen';
CREATE INDEX bid_of_sawyer ON bid (sawyer_id, updated_at DESC);
CREATE INDEX bid_of_listing ON bid (listing_id);
