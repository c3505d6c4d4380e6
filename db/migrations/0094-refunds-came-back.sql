-- A call may be tried several times, and the bank may send more than one of its refunds back: each of them is kept.
ALTER TABLE provider_call ADD COLUMN came_back jsonb NOT NULL DEFAULT '[]' CHECK (kind = 'refund' OR came_back = '[]');
UPDATE provider_call SET came_back = jsonb_build_array(came_back_id) WHERE came_back_id IS NOT NULL;
ALTER TABLE provider_call DROP COLUMN came_back_id;
