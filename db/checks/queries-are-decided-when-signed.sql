-- No queried line is left undecided on a tally that was decided by a moderator, and a queried booking has one that is.
SELECT booking.number AS what, booking.status, count(tally_query.id) FILTER (WHERE tally_query.decided_at IS NULL) AS undecided
FROM booking JOIN tally ON tally.booking_id = booking.id LEFT JOIN tally_query ON tally_query.tally_id = tally.id
GROUP BY booking.id, tally.id
HAVING (booking.status = 'queried' AND count(tally_query.id) FILTER (WHERE tally_query.decided_at IS NULL) = 0)
  OR (tally.signed_by = 'moderator' AND count(tally_query.id) FILTER (WHERE tally_query.decided_at IS NULL) > 0)
