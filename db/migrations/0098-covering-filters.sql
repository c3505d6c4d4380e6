-- A filter that some listings meet is counted, and put in order, from its own index: with what a list is bounded by and ordered by in it,
-- only the rows of the page are read from the table.
DROP INDEX listing_open_board_feet;
DROP INDEX listing_open_largest;
CREATE INDEX listing_open_board_feet ON listing (board_feet) INCLUDE (id, closes_at, saw_by, published_at, map_cell, unit_x, unit_y, unit_z) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_largest ON listing (largest_end_ob_in) INCLUDE (id, closes_at, saw_by, published_at, map_cell, unit_x, unit_y, unit_z) WHERE status = 'open' AND hidden_at IS NULL;
