-- What the sawyer handed in, and when; what a moderator saw of it stays in certificate_seen_at and certificate_expires_on.
ALTER TABLE sawyer_profile
  ADD COLUMN certificate_sent_at timestamptz,
  ADD COLUMN certificate_says_until date,
  ADD CONSTRAINT certificate_sent_whole CHECK ((certificate_sent_at IS NULL) = (certificate_says_until IS NULL) AND (certificate_sent_at IS NULL OR certificate_key IS NOT NULL));
CREATE INDEX certificate_waits ON sawyer_profile (certificate_sent_at) WHERE certificate_sent_at IS NOT NULL;
