-- A sawyer's papers that moderators look at: of insurance, and the one that lets them certify lumber for a dwelling. Of each kind one
-- may wait for a moderator while another, seen before, is still the one that landowners read of.
CREATE TABLE certificate_file (
  id uuid PRIMARY KEY,
  sawyer_id uuid NOT NULL REFERENCES account,
  kind text NOT NULL CHECK (kind IN ('insurance', 'lumber')),
  -- When the form that lets it be sent was last given out.
  form_made_at timestamptz NOT NULL,
  handed_in_at timestamptz,
  -- Set once nobody needs the file for longer than until then.
  remove_after timestamptz,
  removed_at timestamptz,
  CHECK (removed_at IS NULL OR remove_after IS NOT NULL),
  CHECK (handed_in_at IS NOT NULL OR remove_after IS NOT NULL)
);
CREATE UNIQUE INDEX certificate_file_awaited ON certificate_file (sawyer_id, kind) WHERE handed_in_at IS NULL AND removed_at IS NULL;
CREATE INDEX certificate_file_to_remove ON certificate_file (remove_after) WHERE removed_at IS NULL;

CREATE TABLE certificate (
  sawyer_id uuid NOT NULL REFERENCES account,
  kind text NOT NULL CHECK (kind IN ('insurance', 'lumber')),
  waiting_file uuid REFERENCES certificate_file,
  sent_at timestamptz,
  says_until date,
  seen_file uuid REFERENCES certificate_file,
  seen_at timestamptz,
  expires_on date,
  -- Letters sent about the one that was seen running out.
  reminders integer NOT NULL DEFAULT 0 CHECK (reminders >= 0),
  PRIMARY KEY (sawyer_id, kind),
  CHECK ((waiting_file IS NULL) = (sent_at IS NULL) AND (sent_at IS NULL) = (says_until IS NULL)),
  CHECK ((seen_at IS NULL) = (expires_on IS NULL) AND (seen_file IS NULL OR seen_at IS NOT NULL))
);
CREATE INDEX certificate_waits_for_moderator ON certificate (sent_at) WHERE sent_at IS NOT NULL;
CREATE INDEX certificate_runs_out ON certificate (expires_on) WHERE expires_on IS NOT NULL;

INSERT INTO certificate_file (id, sawyer_id, kind, form_made_at, handed_in_at)
  SELECT split_part(certificate_key, '/', 3)::uuid, account_id, 'insurance', coalesce(certificate_sent_at, certificate_seen_at, updated_at), coalesce(certificate_sent_at, certificate_seen_at, updated_at)
  FROM sawyer_profile WHERE certificate_key IS NOT NULL;
-- A file that was refused, or expired long ago, is nobody's any more.
UPDATE certificate_file SET remove_after = now() FROM sawyer_profile p WHERE p.account_id = sawyer_id AND p.certificate_sent_at IS NULL AND p.certificate_seen_at IS NULL;
UPDATE certificate_file SET remove_after = p.certificate_expires_on + interval '30 days' FROM sawyer_profile p
  WHERE p.account_id = sawyer_id AND p.certificate_sent_at IS NULL AND p.certificate_seen_at IS NOT NULL;
INSERT INTO certificate (sawyer_id, kind, waiting_file, sent_at, says_until, seen_file, seen_at, expires_on)
  SELECT account_id, 'insurance', CASE WHEN certificate_sent_at IS NOT NULL THEN split_part(certificate_key, '/', 3)::uuid END, certificate_sent_at, certificate_says_until,
    CASE WHEN certificate_sent_at IS NULL AND certificate_seen_at IS NOT NULL THEN split_part(certificate_key, '/', 3)::uuid END,
    CASE WHEN certificate_expires_on IS NOT NULL THEN certificate_seen_at END, CASE WHEN certificate_seen_at IS NOT NULL THEN certificate_expires_on END
  FROM sawyer_profile WHERE certificate_key IS NOT NULL OR (certificate_seen_at IS NOT NULL AND certificate_expires_on IS NOT NULL);

ALTER TABLE sawyer_profile DROP CONSTRAINT certificate_sent_whole;
ALTER TABLE sawyer_profile DROP COLUMN certificate_key, DROP COLUMN certificate_sent_at, DROP COLUMN certificate_says_until, DROP COLUMN certificate_seen_at, DROP COLUMN certificate_expires_on;
