-- A payment that is settled, refunded or void has nothing left that is held or owed.
SELECT booking.number AS what, held_payment.status, -sum(amount_cents) AS cents
FROM held_payment JOIN booking ON booking.id = held_payment.booking_id JOIN ledger_entry ON ledger_entry.booking_id = booking.id
WHERE held_payment.status IN ('settled', 'refunded', 'void') AND account IN ('landowner held', 'sawyer payable', 'refund payable')
  -- A refund that the bank sent back is owed again and waits for a moderator.
  AND NOT EXISTS (SELECT 1 FROM provider_call WHERE provider_call.booking_id = booking.id AND provider_call.status <> 'done')
GROUP BY booking.number, held_payment.status HAVING sum(amount_cents) <> 0
