-- A review is written by one side of a settled booking about the other.
SELECT review.id AS what FROM review JOIN booking ON booking.id = review.booking_id
WHERE booking.status <> 'settled' OR NOT ((review.author_id, review.subject_id) IN ((booking.landowner_id, booking.sawyer_id), (booking.sawyer_id, booking.landowner_id)))
