-- One outing offered to several landowners. `version` counts the figures: who agrees names the one they saw.
CREATE TABLE shared_trip (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  number integer NOT NULL GENERATED ALWAYS AS IDENTITY (START WITH 7001) UNIQUE,
  sawyer_id uuid NOT NULL REFERENCES account,
  outing_id uuid REFERENCES outing,
  status text NOT NULL DEFAULT 'offered' CHECK (status IN ('offered', 'agreed', 'ended')),
  version integer NOT NULL DEFAULT 1 CHECK (version >= 1),
  day date NOT NULL CHECK (isfinite(day)),
  start_time time NOT NULL DEFAULT '08:00',
  time_zone text NOT NULL,
  card jsonb NOT NULL,
  miles integer NOT NULL CHECK (miles >= 0),
  alone_miles integer NOT NULL CHECK (alone_miles >= 0),
  proven_best boolean NOT NULL,
  whole_cents integer NOT NULL CHECK (whole_cents >= 0),
  alone_cents integer NOT NULL CHECK (alone_cents >= whole_cents),
  answer_by timestamptz NOT NULL,
  ended_because text,
  created_at timestamptz NOT NULL,
  updated_at timestamptz NOT NULL,
  CHECK (status <> 'agreed' OR outing_id IS NOT NULL)
);
CREATE INDEX shared_trip_of_sawyer ON shared_trip (sawyer_id, created_at DESC);
CREATE INDEX shared_trip_to_check ON shared_trip (answer_by) WHERE status = 'offered';

-- One landowner's stop, with what they would pay alone and on the trip. `booking_id` when it was booked before, or since all agreed.
CREATE TABLE trip_stop (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  trip_id uuid NOT NULL REFERENCES shared_trip,
  listing_id uuid NOT NULL REFERENCES listing,
  bid_id uuid NOT NULL REFERENCES bid,
  booking_id uuid REFERENCES booking,
  landowner_id uuid NOT NULL REFERENCES account,
  status text NOT NULL DEFAULT 'asked' CHECK (status IN ('asked', 'agreed', 'bound', 'out')),
  position integer NOT NULL CHECK (position >= 1),
  landing text NOT NULL,
  leg_miles integer NOT NULL CHECK (leg_miles >= 0),
  arrives_min integer NOT NULL CHECK (arrives_min >= 0),
  leaves_min integer NOT NULL CHECK (leaves_min >= arrives_min),
  alone_travel_cents integer NOT NULL CHECK (alone_travel_cents >= 0),
  travel_cents integer NOT NULL CHECK (travel_cents BETWEEN 0 AND alone_travel_cents),
  set_up_cents integer NOT NULL CHECK (set_up_cents >= 0),
  alone_cost_cents integer NOT NULL CHECK (alone_cost_cents >= 0),
  cost_cents integer NOT NULL CHECK (cost_cents >= 0),
  hold_cents integer NOT NULL CHECK (hold_cents >= 0),
  bid_seen_at timestamptz NOT NULL,
  agreed_version integer,
  answered_at timestamptz,
  out_because text,
  UNIQUE (trip_id, listing_id),
  CHECK (status <> 'bound' OR booking_id IS NOT NULL),
  CHECK (status IN ('asked', 'out') OR agreed_version IS NOT NULL)
);
CREATE UNIQUE INDEX one_live_trip_per_bid ON trip_stop (bid_id) WHERE status IN ('asked', 'agreed');
CREATE INDEX trip_stop_of_landowner ON trip_stop (landowner_id, trip_id);
CREATE INDEX trip_stop_of_booking ON trip_stop (booking_id) WHERE status = 'bound';
