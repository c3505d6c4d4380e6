-- A booking that is agreed or further holds days of its own sawyer; one that is proposed or has ended holds none.
SELECT booking.number AS what, booking.status, count(booked_day.id) AS days
FROM booking LEFT JOIN booked_day ON booked_day.booking_id = booking.id AND booked_day.active
GROUP BY booking.id
HAVING (count(booked_day.id) > 0) <> (booking.status NOT IN ('proposed', 'lapsed', 'cancelled')) OR bool_or(booked_day.sawyer_id <> booking.sawyer_id OR booked_day.outing_id <> booking.outing_id)
