-- Per booking: charged = transferred + refunded + fee + what is still held or owed, and what a card dispute took away.
SELECT booking.number AS what, charged, transferred, refunded, fee, owed, disputed
FROM booking
CROSS JOIN LATERAL (SELECT coalesce(sum(charge.amount_cents), 0) AS charged FROM charge JOIN held_payment ON held_payment.id = charge.payment_id WHERE held_payment.booking_id = booking.id) AS charges
CROSS JOIN LATERAL (
  SELECT coalesce(sum((request->>'amountCents')::int) FILTER (WHERE kind = 'transfer'), 0) AS transferred, coalesce(sum((request->>'amountCents')::int) FILTER (WHERE kind = 'refund'), 0) AS refunded
  FROM provider_call WHERE provider_call.booking_id = booking.id AND status = 'done') AS calls
CROSS JOIN LATERAL (
  SELECT -coalesce(sum(amount_cents) FILTER (WHERE account = 'platform fee'), 0) AS fee, -coalesce(sum(amount_cents) FILTER (WHERE account IN ('landowner held', 'sawyer payable', 'refund payable')), 0) AS owed,
    coalesce(sum(amount_cents) FILTER (WHERE account IN ('dispute loss', 'sawyer receivable')), 0) AS apart
  FROM ledger_entry WHERE ledger_entry.booking_id = booking.id) AS ledger
CROSS JOIN LATERAL (SELECT coalesce(sum(amount_cents), 0) - apart AS disputed FROM card_dispute WHERE card_dispute.booking_id = booking.id AND status <> 'won') AS disputes
WHERE charged <> transferred + refunded + fee + owed + disputed
