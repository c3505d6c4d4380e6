-- A payment stands where its booking says: due when agreed, held until signed, settled with it, void when it lapsed.
SELECT booking.number AS what, booking.status AS booking, held_payment.status AS payment
FROM booking LEFT JOIN held_payment ON held_payment.booking_id = booking.id
WHERE NOT CASE booking.status
  WHEN 'proposed' THEN held_payment.id IS NULL
  WHEN 'agreed' THEN coalesce(held_payment.status = 'due', false)
  WHEN 'signed' THEN coalesce(held_payment.status IN ('held', 'settling', 'refunded'), false)
  WHEN 'settled' THEN coalesce(held_payment.status = 'settled', false)
  WHEN 'lapsed' THEN coalesce(held_payment.status = 'void', false)
  WHEN 'cancelled' THEN coalesce(held_payment.status <> 'due', true)
  ELSE coalesce(held_payment.status = 'held', false) END
