-- What a bid's mill makes of the listing's cut list, worked out after the bid: read with the revision and the mill it was planned for.
ALTER TABLE bid ADD COLUMN cut_list jsonb;

-- The grade or certification that a sawyer may give lumber for a dwelling, in the sawyer's own words; empty for none.
ALTER TABLE sawyer_profile ADD COLUMN lumber_credential text NOT NULL DEFAULT '' CHECK (length(lumber_credential) <= 160);
