import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, type Point } from '~/domain/geo.ts';
import { execute, rows } from '~/server/db.ts';
import { Account, Mill, RateCard, SawyerProfile } from '~/server/models/index.ts';
import { Certificate } from '~/server/models/sawyer.ts';
import { sawyerPage } from '~/server/queries/sawyer-page.ts';
import { sawyersNear } from '~/server/queries/sawyers-near.ts';
import { OAK_CARD } from '../support/rate-cards.ts';

const at = new Date('2026-08-01T15:00:00Z');
const from: Point = { lat: 43.532, lng: -90.9286 };
const ids: Record<string, string> = {};

async function makeSawyer(name: string, base: Point, travelMiles: number, more: { mill?: boolean; card?: boolean } = {}): Promise<void> {
  const account = await Account.create({ email: `${name}@cast.example`, emailConfirmedAt: at, passwordHash: 'x', name, isSawyer: true, createdAt: at });
  const coarse = coarsePoint(base);
  await SawyerProfile.create({ accountId: account.id, businessName: `${name} sawing`, town: 'Viroqua', state: 'WI', timeZone: 'America/Chicago', base: { type: 'Point', coordinates: [coarse.lng, coarse.lat] }, travelMiles, updatedAt: at });
  if (more.mill !== false) await Mill.create({ sawyerId: account.id, name: 'Mill', kind: 'band', kerfIn: 3 / 32, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 22, longestFt: 17, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'machine', createdAt: at });
  if (more.card !== false) await RateCard.create({ sawyerId: account.id, revision: 1, card: OAK_CARD, createdAt: at });
  ids[name] = account.id;
}

beforeAll(async () => {
  await makeSawyer('near', { lat: 43.6, lng: -90.9 }, 20);
  await makeSawyer('homebody', { lat: 43.75, lng: -90.9 }, 10);
  await makeSawyer('traveller', { lat: 44.1, lng: -90.5 }, 80);
  await makeSawyer('no mill', { lat: 43.6, lng: -90.9 }, 20, { mill: false });
  await makeSawyer('no card', { lat: 43.6, lng: -90.9 }, 20, { card: false });
});

const names = async (wouldCome: boolean): Promise<string[]> => (await sawyersNear(from, wouldCome, at)).sawyers.map(({ name }) => name);

describe('sawyers near', () => {
  it('are those with a mill and rates who would come, nearest first', async () => {
    expect(await names(true)).toEqual(['near sawing', 'traveller sawing']);
    expect(await names(false)).toEqual(['near sawing', 'homebody sawing', 'traveller sawing']);
  });

  it('show no point, no address and no e-mail', async () => {
    const text = JSON.stringify([await sawyersNear(from, false, at), await sawyerPage(ids['near'] ?? '', from, at)]);
    expect(text).not.toMatch(/cast\.example|"lat"|"lng"|coordinates|43\.6/);
  });

  it('leave out suspended accounts, and their page is not there', async () => {
    await execute(`UPDATE account SET status = 'suspended' WHERE id = $1`, [ids['near']]);
    expect(await names(true)).toEqual(['traveller sawing']);
    await expect(sawyerPage(ids['near'] ?? '', null, at)).rejects.toMatchObject({ kind: 'notFound' });
    await execute(`UPDATE account SET status = 'active' WHERE id = $1`, [ids['near']]);
  });

  it('say that a certificate was seen only while it is valid', async () => {
    await Certificate.create({ sawyerId: ids['near'] ?? '', kind: 'insurance', seenAt: at, expiresOn: '2026-12-31' });
    expect((await sawyerPage(ids['near'] ?? '', null, at)).certificateExpiresOn).toBe('2026-12-31');
    expect((await sawyerPage(ids['near'] ?? '', null, new Date('2027-01-02T00:00:00Z'))).certificateExpiresOn).toBeNull();
  });

  it('answer not found to an id that is none', async () => {
    await expect(sawyerPage("x'; DROP", null, at)).rejects.toMatchObject({ kind: 'notFound' });
  });
});

describe('many sawyers', () => {
  it('come a page at a time, each once, nearest first and by name', async () => {
    for (let index = 0; index < 60; index += 1) await makeSawyer(`many ${index % 20}-${index}`, { lat: 43.55 + (index % 15) * 0.01, lng: -90.9 }, 200);
    for (const place of [from, null]) {
      const seen: string[] = [];
      let after: string | null = null;
      do {
        const page = await sawyersNear(place, true, at, after);
        expect(page.sawyers.length).toBeLessThanOrEqual(50);
        seen.push(...page.sawyers.map(({ id }) => id));
        after = page.next;
      } while (after !== null);
      expect(new Set(seen).size).toBe(seen.length);
      const whole = await rows<{ id: string }>(
        `SELECT a.id FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE a.status = 'active' AND EXISTS (SELECT 1 FROM mill WHERE sawyer_id = a.id) AND EXISTS (SELECT 1 FROM rate_card WHERE sawyer_id = a.id)
         ${place ? `AND (s.base <-> ST_SetSRID(ST_MakePoint($2, $1), 4326)::geography) * 1.25 <= s.travel_miles * 1609.344 ORDER BY s.base <-> ST_SetSRID(ST_MakePoint($2, $1), 4326)::geography, a.id` : 'ORDER BY s.business_name, a.id'}`,
        place ? [place.lat, place.lng] : [],
      );
      expect(seen).toEqual(whole.map(({ id }) => id));
    }
    expect((await sawyersNear(from, true, at, '00000000-0000-4000-8000-000000000000')).sawyers.length).toBe(50);
  });
});
