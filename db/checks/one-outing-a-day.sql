-- A sawyer's day belongs to one outing.
SELECT sawyer_id AS what, day, count(DISTINCT outing_id) AS outings FROM booked_day WHERE active GROUP BY sawyer_id, day HAVING count(DISTINCT outing_id) > 1
