-- A refund that the bank sent back never moves again. Kept so that an answer read before it came back, and heard after, changes nothing.
ALTER TABLE provider_call ADD COLUMN came_back_id text CHECK (came_back_id IS NULL OR kind = 'refund');
