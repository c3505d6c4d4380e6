-- A tally is offered from "tallied" on, and signed, with its settlement frozen, from "signed" on.
SELECT booking.number AS what, booking.status, tally.offered_at, tally.signed_at
FROM booking LEFT JOIN tally ON tally.booking_id = booking.id AND tally.part = 1
WHERE (booking.status IN ('tallied', 'queried', 'signed', 'settled')) <> (tally.offered_at IS NOT NULL)
  OR (booking.status IN ('signed', 'settled')) <> (tally.signed_at IS NOT NULL AND tally.settlement IS NOT NULL AND tally.content_sha256 IS NOT NULL)
