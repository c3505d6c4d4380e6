-- The ledger sums to zero, as a whole and in every group.
SELECT coalesce(group_id::text, 'all') AS what, sum(amount_cents) AS cents
FROM ledger_entry GROUP BY GROUPING SETS ((), (group_id)) HAVING sum(amount_cents) <> 0
