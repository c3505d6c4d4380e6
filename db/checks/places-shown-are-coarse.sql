-- The place that everybody sees is not the exact one, yet within a mile and a half of it.
SELECT number AS what, round(ST_Distance(place, coarse)) AS metres FROM listing
WHERE place IS NOT NULL AND (coarse IS NULL OR ST_Distance(place, coarse) NOT BETWEEN 0.01 AND 2414)
