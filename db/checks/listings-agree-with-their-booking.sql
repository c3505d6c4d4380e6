-- A listing is matched while its booking runs, done once the tally is signed, and anything else without a live booking.
SELECT listing.number AS what, listing.status AS listing, booking.status AS booking
FROM listing LEFT JOIN booking ON booking.listing_id = listing.id AND booking.status NOT IN ('lapsed', 'cancelled')
WHERE (listing.status = 'matched') <> (booking.status IS NOT NULL AND booking.status NOT IN ('signed', 'settled')) OR (listing.status = 'done') <> (booking.status IS NOT NULL AND booking.status IN ('signed', 'settled'))
