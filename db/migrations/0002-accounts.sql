CREATE TABLE account (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  email citext NOT NULL UNIQUE,
  email_confirmed_at timestamptz,
  password_hash text NOT NULL,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 120),
  is_landowner boolean NOT NULL DEFAULT false,
  is_sawyer boolean NOT NULL DEFAULT false,
  is_moderator boolean NOT NULL DEFAULT false,
  status text NOT NULL DEFAULT 'active' CHECK (status IN ('active', 'suspended', 'closed')),
  suspended_reason text,
  totp_secret text,
  totp_confirmed_at timestamptz,
  totp_last_step bigint,
  zip char(5),
  terms_version text,
  terms_accepted_at timestamptz,
  created_at timestamptz NOT NULL,
  closed_at timestamptz,
  CHECK (is_landowner OR is_sawyer OR is_moderator OR status = 'closed')
);

-- The cookie carries the session's secret; the table keeps its SHA-256, and people end sessions by the public id.
CREATE TABLE session (
  id_hash text PRIMARY KEY,
  public_id uuid NOT NULL UNIQUE DEFAULT gen_random_uuid(),
  account_id uuid NOT NULL REFERENCES account ON DELETE CASCADE,
  expires_at timestamptz NOT NULL,
  created_at timestamptz NOT NULL,
  last_seen_at timestamptz NOT NULL,
  second_factor_at timestamptz,
  user_agent text NOT NULL DEFAULT ''
);
CREATE INDEX session_of_account ON session (account_id);

-- Links sent by mail: confirm an address, change it, reset a password. Only the hash is kept; each works once.
CREATE TABLE email_token (
  hash text PRIMARY KEY,
  account_id uuid NOT NULL REFERENCES account ON DELETE CASCADE,
  purpose text NOT NULL CHECK (purpose IN ('confirm-email', 'change-email', 'reset-password')),
  email citext NOT NULL,
  expires_at timestamptz NOT NULL,
  used_at timestamptz,
  created_at timestamptz NOT NULL
);
CREATE INDEX email_token_of_account ON email_token (account_id, purpose);

CREATE TABLE terms_acceptance (
  account_id uuid NOT NULL REFERENCES account,
  version text NOT NULL,
  accepted_at timestamptz NOT NULL,
  PRIMARY KEY (account_id, version)
);

CREATE TABLE account_block (
  blocker_id uuid NOT NULL REFERENCES account,
  blocked_id uuid NOT NULL REFERENCES account,
  created_at timestamptz NOT NULL,
  PRIMARY KEY (blocker_id, blocked_id),
  CHECK (blocker_id <> blocked_id)
);

CREATE TABLE report (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  reporter_id uuid REFERENCES account,
  thing text NOT NULL CHECK (thing IN ('listing', 'message', 'account', 'photo', 'review')),
  thing_id uuid NOT NULL,
  reason text NOT NULL,
  note text NOT NULL DEFAULT '',
  created_at timestamptz NOT NULL,
  handled_at timestamptz,
  handled_by uuid REFERENCES account,
  outcome text
);
CREATE INDEX report_open ON report (created_at) WHERE handled_at IS NULL;
