-- Nobody has a bid on a listing of their own.
SELECT bid.id AS what FROM bid JOIN listing ON listing.id = bid.listing_id WHERE bid.sawyer_id = listing.owner_id
