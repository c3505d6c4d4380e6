-- A bid is chosen exactly as long as its booking lives; the bid of a lapsed or cancelled booking is released.
SELECT bid.id AS what, bid.status AS bid, booking.status AS booking
FROM bid LEFT JOIN booking ON booking.bid_id = bid.id
WHERE (bid.status = 'chosen') <> (booking.id IS NOT NULL AND booking.status NOT IN ('lapsed', 'cancelled')) OR (bid.status = 'released') <> (booking.id IS NOT NULL AND booking.status IN ('lapsed', 'cancelled'))
