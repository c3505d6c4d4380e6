-- A bid that is open or to confirm belongs to a listing that is open or closed to bids.
SELECT bid.id AS what, bid.status AS bid, listing.status AS listing FROM bid JOIN listing ON listing.id = bid.listing_id
WHERE bid.status IN ('open', 'toConfirm') AND listing.status NOT IN ('open', 'closed')
