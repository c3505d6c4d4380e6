-- For filters that few open listings meet: what the list asks by size is found by an index instead of by reading every open listing.
CREATE INDEX listing_open_board_feet ON listing (board_feet) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_largest ON listing (largest_end_ob_in) WHERE status = 'open' AND hidden_at IS NULL;
CREATE INDEX listing_open_longest ON listing (longest_log_ft) WHERE status = 'open' AND hidden_at IS NULL;
