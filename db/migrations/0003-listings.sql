-- `typed` is the form exactly as the landowner left it, so that a draft survives anything; the other columns are what was
-- understood of it at publishing or revising. `place` is exact; `coarse` is the same place moved to the grid.
CREATE TABLE listing (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  number integer NOT NULL GENERATED ALWAYS AS IDENTITY (START WITH 1001) UNIQUE,
  owner_id uuid NOT NULL REFERENCES account,
  status text NOT NULL DEFAULT 'draft'
    CHECK (status IN ('draft', 'open', 'closed', 'matched', 'done', 'withdrawn', 'lapsed')),
  revision integer NOT NULL DEFAULT 0 CHECK (revision >= 0),
  typed jsonb NOT NULL DEFAULT '{}',
  typed_version integer NOT NULL DEFAULT 1,
  title text,
  tree_owner text CHECK (tree_owner IN ('mine', 'permission')),
  tree_owner_confirmed_at timestamptz,
  how_down text CHECK (how_down IN ('snapped', 'uprooted', 'felled', 'cleared')),
  came_down_on date,
  ends_sealed boolean,
  zip char(5),
  town text,
  state char(2),
  time_zone text,
  place geography(Point, 4326),
  coarse geography(Point, 4326),
  access jsonb,
  landing jsonb,
  waste jsonb,
  metal_risk text CHECK (metal_risk IN ('none-known', 'lawn-tree', 'fence-line', 'known-metal', 'unknown')),
  metal_note text NOT NULL DEFAULT '',
  note text NOT NULL DEFAULT '',
  closes_at timestamptz,
  lapses_at timestamptz,
  saw_by date,
  saw_by_reason text,
  species text[] NOT NULL DEFAULT '{}',
  log_count integer NOT NULL DEFAULT 0,
  board_feet integer NOT NULL DEFAULT 0 CHECK (board_feet >= 0),
  largest_end_ob_in double precision NOT NULL DEFAULT 0,
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL,
  published_at timestamptz,
  hidden_at timestamptz,
  hidden_reason text,
  CHECK (status = 'draft' OR (title IS NOT NULL AND tree_owner_confirmed_at IS NOT NULL AND how_down IS NOT NULL
    AND came_down_on IS NOT NULL AND place IS NOT NULL AND coarse IS NOT NULL AND time_zone IS NOT NULL
    AND closes_at IS NOT NULL AND metal_risk IS NOT NULL AND log_count > 0 AND published_at IS NOT NULL))
);
CREATE INDEX listing_of_owner ON listing (owner_id, updated_at DESC);
CREATE INDEX listing_open_near ON listing USING gist (coarse) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_newest ON listing (published_at DESC, id) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_closing ON listing (closes_at, id) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_saw_by ON listing (saw_by, id) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_species ON listing USING gin (species) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_to_lapse ON listing (lapses_at) WHERE status = 'closed';

-- Measures in decimal inches and feet, inside bark. Ids are kept through revisions so that photographs and tallies stay tied.
CREATE TABLE log (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  listing_id uuid NOT NULL REFERENCES listing ON DELETE CASCADE,
  position integer NOT NULL CHECK (position >= 1),
  label text NOT NULL DEFAULT '',
  species text NOT NULL,
  small_end_in double precision NOT NULL CHECK (small_end_in BETWEEN 4 AND 60),
  large_end_in double precision CHECK (large_end_in >= small_end_in),
  length_ft double precision NOT NULL CHECK (length_ft BETWEEN 4 AND 40),
  heart_defect_in double precision CHECK (heart_defect_in > 0),
  defects jsonb NOT NULL DEFAULT '[]',
  note text NOT NULL DEFAULT '',
  added_on_the_day boolean NOT NULL DEFAULT false,
  removed_at timestamptz
);
CREATE UNIQUE INDEX log_position ON log (listing_id, position) WHERE removed_at IS NULL;

-- The cut list: what the landowner hopes to build.
CREATE TABLE piece (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  listing_id uuid NOT NULL REFERENCES listing ON DELETE CASCADE,
  position integer NOT NULL CHECK (position >= 1),
  label text NOT NULL DEFAULT '',
  thickness_in double precision NOT NULL CHECK (thickness_in > 0),
  width_in double precision NOT NULL CHECK (width_in > 0),
  length_ft double precision NOT NULL CHECK (length_ft > 0),
  count integer NOT NULL CHECK (count > 0),
  sizing text NOT NULL CHECK (sizing IN ('full-sawn', 'store-size')),
  for_dwelling boolean NOT NULL DEFAULT false,
  UNIQUE (listing_id, position)
);

-- Originals are private and never served; `status` follows the check and the making of renditions.
CREATE TABLE photo (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  listing_id uuid NOT NULL REFERENCES listing ON DELETE CASCADE,
  owner_id uuid NOT NULL REFERENCES account,
  log_id uuid REFERENCES log ON DELETE SET NULL,
  position integer NOT NULL,
  caption text NOT NULL DEFAULT '',
  file_name text NOT NULL DEFAULT '',
  original_key text NOT NULL UNIQUE,
  status text NOT NULL DEFAULT 'awaiting' CHECK (status IN ('awaiting', 'checking', 'ready', 'refused')),
  refused_because text,
  width integer,
  height integer,
  blur text,
  bytes integer,
  created_at timestamptz NOT NULL,
  ready_at timestamptz,
  removed_at timestamptz
);
CREATE INDEX photo_of_listing ON photo (listing_id, position) WHERE removed_at IS NULL;
