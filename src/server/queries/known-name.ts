/**
 * SQL for the name of `account` as the reader (a bound parameter, null for a visitor) may read it: whole for a sawyer, who works in public,
 * and for whoever the reader has written with; of anybody else the first name, as under a review.
 */
export const knownName = (reader: string): string =>
  `CASE WHEN account.is_sawyer OR account.id = ${reader} OR EXISTS (SELECT 1 FROM conversation c WHERE ${reader} IN (c.landowner_id, c.sawyer_id) AND account.id IN (c.landowner_id, c.sawyer_id))
    THEN account.name ELSE split_part(account.name, ' ', 1) END`;
