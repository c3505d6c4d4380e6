-- Every booking has its terms frozen in a work agreement.
SELECT booking.number AS what FROM booking LEFT JOIN work_agreement ON work_agreement.booking_id = booking.id WHERE work_agreement.booking_id IS NULL
