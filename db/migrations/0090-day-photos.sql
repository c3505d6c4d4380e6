-- Photographs taken on the milling day: of a metal hit, or of the boards. They belong to the booking, never show with the listing's own,
-- and are for its two sides. A hit that was taken back leaves its photograph with the boards'.
ALTER TABLE photo ADD COLUMN booking_id uuid REFERENCES booking;
ALTER TABLE photo ADD COLUMN shows text CHECK (shows IN ('metal', 'boards'));
ALTER TABLE photo ADD COLUMN hit_id uuid REFERENCES metal_hit;
ALTER TABLE photo ADD CONSTRAINT photo_of_the_day CHECK ((booking_id IS NULL) = (shows IS NULL) AND (hit_id IS NULL OR shows = 'metal'));
CREATE INDEX photo_of_booking ON photo (booking_id, created_at) WHERE booking_id IS NOT NULL AND removed_at IS NULL;
