import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, type Point } from '~/domain/geo.ts';
import type { RateCard as Card, SawingBasis } from '~/domain/trade/rate-card.ts';
import { execute } from '~/server/db.ts';
import { Account, Mill, RateCard, SawyerProfile } from '~/server/models/index.ts';
import { quotingPractice } from '~/server/queries/quoting-practice.ts';
import { OAK_CARD } from '../support/rate-cards.ts';

const at = new Date('2026-08-01T15:00:00Z');
const near: Point = { lat: 43.6, lng: -90.9 };
const doyle: SawingBasis = { kind: 'log-scale', rule: 'doyle', smallestLog: null, perBf: { withCents: 60, withoutCents: 50 } };
const hourly: SawingBasis = { kind: 'hourly', from: 'arrival', perHour: { withCents: 11_000, withoutCents: 9_000 } };

/** A sawyer with a mill and these rate cards, the last one the present one. */
async function sawyer(name: string, base: Point, ...bases: readonly SawingBasis[]): Promise<string> {
  const { id } = await Account.create({ email: `${name}@cast.example`, emailConfirmedAt: at, passwordHash: 'x', name, isSawyer: true, createdAt: at });
  const { lat, lng } = coarsePoint(base);
  await SawyerProfile.create({ accountId: id, businessName: `${name} sawing`, town: 'Viroqua', state: 'WI', timeZone: 'America/Chicago', base: { type: 'Point', coordinates: [lng, lat] }, travelMiles: 30, updatedAt: at });
  await Mill.create({ sawyerId: id, name: 'Mill', kind: 'band', kerfIn: 3 / 32, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 22, longestFt: 17, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'machine', createdAt: at });
  for (const [index, basis] of bases.entries()) await RateCard.create({ sawyerId: id, revision: index + 1, card: { ...OAK_CARD, basis } satisfies Card, createdAt: at });
  return id;
}

beforeAll(async () => {
  await sawyer('tally', near, doyle, OAK_CARD.basis);
  await sawyer('tally-too', { lat: 43.9, lng: -91 }, OAK_CARD.basis);
  await sawyer('doyle', { lat: 43.4, lng: -90.4 }, OAK_CARD.basis, doyle);
  await sawyer('hourly', near, hourly);
  await sawyer('far', { lat: 46.5, lng: -84.3 }, doyle);
  await sawyer('no-card', near);
});

describe('what sawyers near a ZIP code charge by', () => {
  it('is not counted where they are few', async () => {
    expect(await quotingPractice('54665')).toEqual({ zip: '54665', radiusMi: 100, fewest: 5, practice: null });
  });

  it('counts the present card of each, the commonest first, and names no basis of a single one', async () => {
    const fifth = await sawyer('doyle-too', near, doyle);
    const bases = [
      { basis: 'log-scale', rule: 'doyle', sawyers: 2 },
      { basis: 'lumber-tally', rule: 'hardwood', sawyers: 2 },
    ];
    expect((await quotingPractice('54665')).practice).toEqual({ sawyers: 5, bases, others: 1 });
    const [sixth, seventh] = [await sawyer('scribner', near, { ...doyle, rule: 'scribnerDecimalC' }), await sawyer('international', near, { ...doyle, rule: 'internationalQuarter' })];
    expect((await quotingPractice('54665')).practice).toEqual({ sawyers: 7, bases: [...bases, { basis: 'log-scale', rule: null, sawyers: 2 }], others: 1 });
    for (const id of [sixth, seventh]) await execute(`UPDATE account SET status = 'suspended' WHERE id = $1`, [id]);
    await execute(`UPDATE account SET status = 'suspended' WHERE id = $1`, [fifth]);
    expect((await quotingPractice('54665')).practice).toBeNull();
  });

  it('refuses a ZIP code that is none beside its field', async () => {
    await expect(quotingPractice('00000')).rejects.toMatchObject({ kind: 'invalid' });
  });
});
