-- The last recorded move of a listing, bid, booking or held payment led to the status it has.
SELECT thing AS what, id, status, to_status AS recorded
FROM (
  SELECT 'listing' AS thing, id, status, 'draft' AS first FROM listing
  UNION ALL SELECT 'bid', id, status, 'open' FROM bid
  UNION ALL SELECT 'booking', id, status, 'proposed' FROM booking
  UNION ALL SELECT 'heldPayment', id, status, 'due' FROM held_payment
) AS things
LEFT JOIN LATERAL (SELECT to_status FROM event WHERE event.thing = things.thing AND event.thing_id = things.id AND to_status IS NOT NULL ORDER BY event.id DESC LIMIT 1) AS newest ON true
WHERE status <> coalesce(to_status, first)
