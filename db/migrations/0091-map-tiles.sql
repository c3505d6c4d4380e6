-- Where a listing's coarse point lies on the map: column and row of the square world map (Web Mercator) cut into 2^26 each way, and
-- the two with their bits interleaved, so that every tile of every zoom is one stretch of one index. Made from the coarse point alone;
-- `domain/finding/tiles.ts` works out the same.
CREATE FUNCTION map_column(lng double precision) RETURNS integer LANGUAGE sql IMMUTABLE STRICT PARALLEL SAFE
  AS $$ SELECT greatest(0, least(67108863, floor((lng + 180) / 360 * 67108864)))::integer $$;

CREATE FUNCTION map_row(lat double precision) RETURNS integer LANGUAGE sql IMMUTABLE STRICT PARALLEL SAFE
  AS $$ SELECT greatest(0, least(67108863, floor((1 - asinh(tan(radians(greatest(-89.9, least(89.9, lat))))) / pi()) / 2 * 67108864)))::integer $$;

-- The bits of 26 spread out, with a nought before each.
CREATE FUNCTION spread_bits(given integer) RETURNS bigint LANGUAGE plpgsql IMMUTABLE STRICT PARALLEL SAFE AS $$
DECLARE
  bits bigint := given;
BEGIN
  bits := (bits | (bits << 16)) & 281470681808895;
  bits := (bits | (bits << 8)) & 71777214294589695;
  bits := (bits | (bits << 4)) & 1085102592571150095;
  bits := (bits | (bits << 2)) & 3689348814741910323;
  RETURN (bits | (bits << 1)) & 6148914691236517205;
END $$;

ALTER TABLE listing
  ADD COLUMN map_x integer GENERATED ALWAYS AS (map_column(ST_X(coarse::geometry))) STORED,
  ADD COLUMN map_y integer GENERATED ALWAYS AS (map_row(ST_Y(coarse::geometry))) STORED,
  ADD COLUMN map_cell bigint GENERATED ALWAYS AS ((spread_bits(map_row(ST_Y(coarse::geometry))) << 1) | spread_bits(map_column(ST_X(coarse::geometry)))) STORED;

-- The coarse point as a vector of length one from the middle of the earth: how far two lie apart is three products.
ALTER TABLE listing
  ADD COLUMN unit_x double precision GENERATED ALWAYS AS (cos(radians(ST_Y(coarse::geometry))) * cos(radians(ST_X(coarse::geometry)))) STORED,
  ADD COLUMN unit_y double precision GENERATED ALWAYS AS (cos(radians(ST_Y(coarse::geometry))) * sin(radians(ST_X(coarse::geometry)))) STORED,
  ADD COLUMN unit_z double precision GENERATED ALWAYS AS (sin(radians(ST_Y(coarse::geometry)))) STORED;

-- With everything that a tile filters by and shows, so that a tile is made from the index alone; and all that near-by listings are counted and put in order by.
CREATE INDEX listing_open_map ON listing (map_cell)
  INCLUDE (map_x, map_y, number, board_feet, largest_end_ob_in, shortest_log_ft, longest_log_ft, closes_at, species, unit_x, unit_y, unit_z, id, saw_by, published_at) WHERE status = 'open' AND hidden_at IS NULL;
