-- What the landowner has allowed beyond the first two metal hits, passes opened on a cull log, and how often a waiting tally was recalled.
ALTER TABLE cull_log ADD COLUMN passes integer NOT NULL DEFAULT 0 CHECK (passes >= 0);
ALTER TABLE tally ADD COLUMN metal_allowed integer NOT NULL DEFAULT 0 CHECK (metal_allowed >= 0);
ALTER TABLE tally ADD COLUMN ended_by_sawyer boolean NOT NULL DEFAULT false;
ALTER TABLE booking ADD COLUMN sign_reminders integer NOT NULL DEFAULT 0;
