-- A checkout is complete exactly when its charge has arrived.
SELECT checkout.id AS what, checkout.status, checkout.amount_cents, charge.amount_cents AS charged
FROM checkout LEFT JOIN charge ON charge.checkout_id = checkout.id
WHERE (checkout.status = 'complete') <> (charge.id IS NOT NULL) OR charge.amount_cents <> checkout.amount_cents
