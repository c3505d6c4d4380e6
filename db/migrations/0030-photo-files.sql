-- A removed photograph leaves the pages at once; its files are deleted from storage by a sweep, which notes it here.
ALTER TABLE photo ADD COLUMN files_removed_at timestamptz;
CREATE INDEX photo_files_left ON photo (removed_at) WHERE removed_at IS NOT NULL AND files_removed_at IS NULL;
CREATE INDEX photo_unfinished ON photo (created_at) WHERE status IN ('awaiting', 'checking') AND removed_at IS NULL;
