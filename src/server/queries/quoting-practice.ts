import type { Point } from '~/domain/geo.ts';
import type { QuotingPractice } from '~/schemas/quoting-practice.ts';
import { rows } from '../db.ts';

/** As far as a sawyer would hardly ever come; wide enough that a count does not point at one person. */
const radiusMi = 100;
const metresPerMile = 1609.344;

interface Row {
  basis: QuotingPractice['practices'][number]['basis'];
  rule: string | null;
  sawyers: number;
}

/** By what the sawyers round a point charge: counts of their present rate cards, no names. Leans on `sawyer_near` and the rate card's key. */
export async function quotingPractice({ lat, lng }: Point): Promise<QuotingPractice> {
  const practices = await rows<Row>(
    `SELECT card.basis ->> 'kind' AS basis, card.basis ->> 'rule' AS rule, count(*)::int AS sawyers
       FROM sawyer_profile
       JOIN account ON account.id = sawyer_profile.account_id AND account.status = 'active' AND account.is_sawyer
       CROSS JOIN LATERAL (SELECT rate_card.card -> 'basis' AS basis FROM rate_card WHERE rate_card.sawyer_id = account.id ORDER BY revision DESC LIMIT 1) AS card
      WHERE ST_DWithin(sawyer_profile.base, ST_MakePoint($1, $2)::geography, $3)
      GROUP BY 1, 2
      ORDER BY 3 DESC, 1, 2`,
    [lng, lat, radiusMi * metresPerMile],
  );
  return { radiusMi, sawyers: practices.reduce((sum, practice) => sum + practice.sawyers, 0), practices };
}
