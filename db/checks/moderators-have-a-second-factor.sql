-- Every moderator has a second factor.
SELECT email AS what FROM account WHERE is_moderator AND status = 'active' AND (totp_secret IS NULL OR totp_confirmed_at IS NULL)
