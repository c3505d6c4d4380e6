-- A listing has at most one chosen bid.
SELECT listing.number AS what, count(*) AS chosen FROM bid JOIN listing ON listing.id = bid.listing_id WHERE bid.status = 'chosen' GROUP BY listing.number HAVING count(*) > 1
