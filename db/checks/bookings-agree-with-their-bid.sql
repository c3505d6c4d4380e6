-- A booking is between the owner of its listing and the sawyer of its bid, on that listing.
SELECT booking.number AS what FROM booking JOIN bid ON bid.id = booking.bid_id JOIN listing ON listing.id = booking.listing_id
WHERE bid.listing_id <> booking.listing_id OR bid.sawyer_id <> booking.sawyer_id OR listing.owner_id <> booking.landowner_id
