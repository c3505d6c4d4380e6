-- Every charge stands in the ledger once, for its whole amount.
SELECT charge.provider_charge_id AS what, charge.amount_cents AS charged, -sum(entry.amount_cents) AS entered
FROM charge LEFT JOIN ledger_group AS grp ON grp.cause = 'charge' AND grp.cause_id = charge.provider_charge_id
LEFT JOIN ledger_entry AS entry ON entry.group_id = grp.id AND entry.account IN ('landowner held', 'refund payable')
GROUP BY charge.id HAVING coalesce(-sum(entry.amount_cents), 0) <> charge.amount_cents
