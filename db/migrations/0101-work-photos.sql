-- A photograph belongs to a listing (a milling day's to its booking as well) or to a sawyer's own page, and shows there alone.
ALTER TABLE photo ALTER COLUMN listing_id DROP NOT NULL;
ALTER TABLE photo ADD COLUMN sawyer_id uuid REFERENCES sawyer_profile;
ALTER TABLE photo ADD CONSTRAINT photo_in_one_place CHECK ((listing_id IS NULL) <> (sawyer_id IS NULL));
ALTER TABLE photo ADD CONSTRAINT photo_of_own_work CHECK (sawyer_id IS NULL OR (owner_id = sawyer_id AND log_id IS NULL AND booking_id IS NULL));
-- Removed ones too: the desk reads what happened to them.
CREATE INDEX photo_of_sawyer ON photo (sawyer_id, position) WHERE sawyer_id IS NOT NULL;
