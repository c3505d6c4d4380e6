import type { QuotingPractice } from '~/schemas/quoting-practice.ts';
import { rows } from '../db.ts';
import { invalid } from '../errors.ts';
import { placeOfZip } from '../services/places.ts';
import { publicSawyerConditions } from './sawyers-near.ts';

/** As far as a sawyer would hardly ever come. */
const radiusMi = 100;
const metresPerMile = 1609.344;
/** With fewer than this a count would point at people. */
const fewest = 5;
/** A basis that a single sawyer has is not named. */
const fewestOfABasis = 2;

interface Row {
  readonly basis: 'lumber-tally' | 'log-scale' | 'hourly';
  readonly rule: string | null;
  readonly sawyers: number;
}

/** The bases that several have; single ones are told together by their kind, and left out where that is a single sawyer too. */
function named(found: readonly Row[]): Row[] {
  const single = found.filter((row) => row.sawyers < fewestOfABasis);
  const kinds = [...new Set(single.map(({ basis }) => basis))].map((basis) => ({ basis, rule: null, sawyers: single.filter((row) => row.basis === basis).reduce((sum, row) => sum + row.sawyers, 0) }));
  return [...found, ...kinds].filter((row) => row.sawyers >= fewestOfABasis).sort((a, b) => b.sawyers - a.sawyers);
}

/**
 * What the sawyers within a hundred miles of a ZIP code charge by: counts of their present rate cards, no names. Leans on
 * `sawyer_near` and the rate card's key.
 * @throws Refusal `invalid` for a code without an area
 */
export async function quotingPractice(zip: string): Promise<QuotingPractice> {
  const place = placeOfZip(zip);
  if (!place) throw invalid([{ path: 'zip', message: 'That ZIP code has no area of its own. Use a neighbouring one.' }]);
  const found = await rows<Row>(
    `SELECT card.basis ->> 'kind' AS basis, card.basis ->> 'rule' AS rule, count(*)::int AS sawyers
     FROM sawyer_profile s JOIN account a ON a.id = s.account_id
     CROSS JOIN LATERAL (SELECT r.card -> 'basis' AS basis FROM rate_card r WHERE r.sawyer_id = a.id ORDER BY r.revision DESC LIMIT 1) card
     WHERE ${publicSawyerConditions} AND ST_DWithin(s.base, ST_SetSRID(ST_MakePoint($1, $2), 4326)::geography, $3)
     GROUP BY 1, 2 ORDER BY 3 DESC, 1, 2`,
    [place.point.lng, place.point.lat, radiusMi * metresPerMile],
  );
  const sawyers = found.reduce((sum, row) => sum + row.sawyers, 0);
  const bases = named(found);
  const others = sawyers - bases.reduce((sum, row) => sum + row.sawyers, 0);
  return { zip: place.zip, radiusMi, fewest, practice: sawyers < fewest ? null : { sawyers, bases, others } };
}
