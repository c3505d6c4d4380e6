-- An open bid was worked out on the listing's present revision; an older one waits to be confirmed.
SELECT bid.id AS what, bid.listing_revision AS bid, listing.revision AS listing FROM bid JOIN listing ON listing.id = bid.listing_id
WHERE bid.status = 'open' AND bid.listing_revision <> listing.revision
