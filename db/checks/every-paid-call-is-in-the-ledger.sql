-- Every transfer and refund that the provider has made stands in the ledger once, for its whole amount.
SELECT call.id AS what, call.kind, call.request->>'amountCents' AS cents, sum(entry.amount_cents) AS entered
FROM provider_call AS call LEFT JOIN ledger_group AS grp ON grp.cause = call.kind AND grp.cause_id = call.provider_id
LEFT JOIN ledger_entry AS entry ON entry.group_id = grp.id AND entry.account IN ('sawyer payable', 'refund payable')
WHERE call.kind IN ('transfer', 'refund') AND call.status = 'done'
GROUP BY call.id HAVING coalesce(sum(entry.amount_cents), 0) <> (call.request->>'amountCents')::int
