-- Every receipt and statement that was given out: its number is never given to another. The same content keeps its number.
CREATE TABLE money_document (
  number integer GENERATED ALWAYS AS IDENTITY (START WITH 10001) PRIMARY KEY,
  account_id uuid NOT NULL REFERENCES account,
  kind text NOT NULL CHECK (kind IN ('receipt', 'earnings', 'payments')),
  subject text NOT NULL,
  sha256 text NOT NULL,
  made_at timestamptz NOT NULL,
  UNIQUE (account_id, kind, subject, sha256)
);
CREATE TRIGGER money_document_is_kept BEFORE UPDATE OR DELETE ON money_document FOR EACH ROW EXECUTE FUNCTION refuse_change();
