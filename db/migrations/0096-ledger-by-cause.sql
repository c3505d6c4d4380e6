-- Reconciliation asks for what is entered for each object of the provider's.
CREATE INDEX ledger_group_of_cause ON ledger_group (cause_id);
