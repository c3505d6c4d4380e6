import { beforeAll, expect, test } from 'vitest';
import { execute } from '~/server/db.ts';
import { RateCard, SawyerProfile } from '~/server/models/index.ts';
import { quotingPractice } from '~/server/queries/quoting-practice.ts';
import { OAK_CARD } from '../support/rate-cards.ts';
import { CAST_MADE_AT, makeAccount } from '../support/cast.ts';

const coulee = { lat: 43.65, lng: -90.85 };
const doyle = { ...OAK_CARD, basis: { kind: 'log-scale', rule: 'doyle', smallestLog: null, perBf: { withCents: 60, withoutCents: 50 } } };

async function sawyer(name: string, at: { lat: number; lng: number }, ...cards: readonly unknown[]): Promise<string> {
  const { id } = await makeAccount({ name, sawyer: true });
  await SawyerProfile.create({ accountId: id, updatedAt: CAST_MADE_AT });
  await execute('UPDATE sawyer_profile SET base = ST_MakePoint($2, $3)::geography WHERE account_id = $1', [id, at.lng, at.lat]);
  for (const [index, card] of cards.entries()) await RateCard.create({ sawyerId: id, revision: index + 1, card, createdAt: CAST_MADE_AT });
  return id;
}

beforeAll(async () => {
  await sawyer('Near Tally', coulee, doyle, OAK_CARD);
  await sawyer('Near Doyle', { lat: 43.9, lng: -91 }, OAK_CARD, doyle);
  await sawyer('Also Doyle', { lat: 43.4, lng: -90.4 }, doyle);
  await sawyer('Far Doyle', { lat: 46.5, lng: -84.3 }, doyle);
  await sawyer('No Card', coulee);
  const closed = await sawyer('Gone Away', coulee, doyle);
  await execute(`UPDATE account SET status = 'closed' WHERE id = $1`, [closed]);
});

test('counts the present card of each active sawyer within a hundred miles', async () => {
  expect(await quotingPractice(coulee)).toEqual({
    radiusMi: 100,
    sawyers: 3,
    practices: [
      { basis: 'log-scale', rule: 'doyle', sawyers: 2 },
      { basis: 'lumber-tally', rule: 'hardwood', sawyers: 1 },
    ],
  });
});

test('nobody near is an answer too', async () => {
  expect(await quotingPractice({ lat: 30, lng: -100 })).toEqual({ radiusMi: 100, sawyers: 0, practices: [] });
});
