-- What is held or owed on a booking, and the fee taken, are never negative.
SELECT booking.number AS what, account, -sum(amount_cents) AS cents
FROM ledger_entry JOIN booking ON booking.id = ledger_entry.booking_id
WHERE account IN ('landowner held', 'sawyer payable', 'refund payable', 'platform fee') GROUP BY booking.number, account HAVING sum(amount_cents) > 0
