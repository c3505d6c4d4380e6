-- One open report of a thing by one person; handled ones are history.
CREATE UNIQUE INDEX report_once ON report (reporter_id, thing, thing_id) WHERE handled_at IS NULL AND reporter_id IS NOT NULL;
CREATE INDEX report_of_thing ON report (thing, thing_id, created_at DESC);
ALTER TABLE report ADD CONSTRAINT report_handled_whole CHECK ((handled_at IS NULL) = (handled_by IS NULL) AND (handled_at IS NULL) = (outcome IS NULL));

-- Why a moderator took a message away.
ALTER TABLE message ADD COLUMN hidden_reason text;

-- The desk looks for the newest of everything, and searches names and addresses by a part of them.
CREATE EXTENSION IF NOT EXISTS pg_trgm;
CREATE INDEX account_newest ON account (created_at DESC, id DESC);
CREATE INDEX account_by_name ON account USING gin (name gin_trgm_ops);
CREATE INDEX account_by_email ON account USING gin ((email::text) gin_trgm_ops);
CREATE INDEX listing_by_title ON listing USING gin (title gin_trgm_ops);
CREATE INDEX event_of_places ON event (id) WHERE action = 'seePlace';
