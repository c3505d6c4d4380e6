-- Why a moderator took a review out, as with messages. A photograph that is taken out is removed, and its files with it; the audit log says why.
ALTER TABLE review ADD COLUMN hidden_reason text;
ALTER TABLE review ADD CONSTRAINT review_hidden_whole CHECK ((hidden_at IS NULL) = (hidden_reason IS NULL));
