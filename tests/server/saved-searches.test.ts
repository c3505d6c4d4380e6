import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { SearchFilters } from '~/domain/finding/saved-search.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { matchSearches } from '~/server/commands/match-searches.ts';
import { changeSearch, removeSearch, saveSearch } from '~/server/commands/save-search.ts';
import { stopSearch } from '~/server/commands/stop-search.ts';
import { tellSearches } from '~/server/commands/tell-searches.ts';
import { withdrawListing } from '~/server/commands/withdraw-listing.ts';
import { execute, rows } from '~/server/db.ts';
import { FoundListing, SavedSearch } from '~/server/models/finding.ts';
import { Log } from '~/server/models/listing.ts';
import { savedSearches } from '~/server/queries/saved-searches.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { LISTED_AT, openListing } from '../support/listings.ts';
import { makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
const anything: SearchFilters = { from: { point: { lat: 43.94, lng: -90.81 }, zip: '54656', radiusMi: 100 }, species: null, minBoardFeet: null, maxLargestEndIn: null, closing: false, fits: false, minPerHourCents: null };
const save = (filters: Partial<SearchFilters> = {}, tells: 'at-once' | 'daily' = 'at-once', by = cast.bram) => saveSearch(by, { ...anything, ...filters }, { name: 'Near home', tells }, MARKET_AT);

const letters = async (to = cast.bram.email): Promise<MailMessage[]> =>
  (await rows<{ data: MailMessage }>(`SELECT data FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 AND data ? 'unsubscribe' ORDER BY created_on, id`, [to])).map(({ data }) => data);
const stopToken = (letter: MailMessage | undefined): string => decodeURIComponent(new URL(letter?.unsubscribe ?? '').pathname.split('/').at(-1) ?? '');

beforeAll(async () => {
  cast = await makeCast();
  await setUpSawyer(cast.bram.id);
});
beforeEach(async () => {
  await execute('DELETE FROM found_listing');
  await execute('DELETE FROM saved_search');
  await execute(`DELETE FROM pgboss.job`);
});

describe('a saved search', () => {
  it('writes at once, with what the logs bring and the link that stops it', async () => {
    await save();
    const listing = await makeOpenListing(cast.ada.id);
    await matchSearches(listing.id, MARKET_AT);
    const [letter, ...others] = await letters();
    expect(others).toEqual([]);
    expect(letter?.subject).toBe('White oak, 3 logs, near Viroqua');
    expect(letter?.text).toContain('Your mill: fits Wide band');
    expect(letter?.text).toMatch(/Estimate: \$\d+, 2 1\/2 h at work, \d+ mi there and back, \$\d+ an hour/);
    expect(letter?.text).toContain(`Stop letters for “Near home”: ${letter?.unsubscribe}`);
  });

  it('never writes twice of the same listing, whichever search finds it, even when two look at once', async () => {
    await save();
    await save({ species: 'white-oak' });
    await save({}, 'daily');
    const listing = await makeOpenListing(cast.ada.id);
    await Promise.all(Array.from({ length: 6 }, () => matchSearches(listing.id, MARKET_AT)));
    await tellSearches(new Date('2026-07-25T15:00:00Z'));
    expect(await letters()).toHaveLength(1);
  });

  it('finds by distance, species, size, closing, fit and money an hour', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    const cases: readonly (readonly [Partial<SearchFilters>, number])[] = [
      [{ from: { point: { lat: 43.94, lng: -90.81 }, zip: null, radiusMi: 5 } }, 0],
      [{ from: null }, 1],
      [{ species: 'black-walnut' }, 0],
      [{ minBoardFeet: 401 }, 0],
      [{ maxLargestEndIn: 20 }, 0],
      [{ closing: true }, 0],
      [{ fits: true }, 1],
      [{ minPerHourCents: 100_000 }, 0],
      [{ minPerHourCents: 1_000 }, 1],
    ];
    for (const [filters, expected] of cases) {
      await execute('DELETE FROM found_listing');
      await execute('DELETE FROM saved_search');
      await save(filters);
      await matchSearches(listing.id, MARKET_AT);
      expect([filters, await FoundListing.count()]).toEqual([filters, expected]);
    }
    await execute('DELETE FROM found_listing');
    await Log.update({ lengthFt: 22 }, { where: { listingId: listing.id, position: 1 } });
    await save({ fits: true });
    await SavedSearch.update({ minPerHourCents: null }, { where: { minPerHourCents: 1_000 } });
    await execute('DELETE FROM saved_search WHERE NOT fits');
    await matchSearches(listing.id, MARKET_AT);
    expect(await FoundListing.count()).toBe(0);
  });

  it('is matched in the transaction that publishes', async () => {
    const listing = await openListing(cast.ada);
    const jobs = await rows<{ data: { listingId: string } }>(`SELECT data FROM pgboss.job WHERE name = 'match-searches'`);
    expect(jobs.map(({ data }) => data)).toEqual([{ listingId: listing.id }]);
  });

  it('says nothing of one’s own listing, of a blocked owner’s, of one withdrawn or hidden', async () => {
    await save({}, 'at-once', cast.dora);
    await save();
    const own = await makeOpenListing(cast.dora.id);
    await execute('INSERT INTO account_block (blocker_id, blocked_id, created_at) VALUES ($1, $2, now())', [cast.ada.id, cast.bram.id]);
    const blocked = await makeOpenListing(cast.ada.id);
    const withdrawn = await makeOpenListing(cast.dora.id);
    await withdrawListing(cast.dora, { number: withdrawn.number, reason: '' }, MARKET_AT);
    const hidden = await makeOpenListing(cast.dora.id);
    await hidden.update({ hiddenAt: MARKET_AT });
    for (const { id } of [own, blocked, withdrawn, hidden]) await matchSearches(id, MARKET_AT);
    await execute('DELETE FROM account_block');
    expect((await FoundListing.findAll()).map(({ sawyerId, listingId }) => [sawyerId, listingId]).sort()).toEqual([[cast.bram.id, own.id], [cast.dora.id, blocked.id]].sort());
  });
});

describe('a daily letter', () => {
  it('gathers what is still open, from the sawyer’s own morning on, once a day', async () => {
    await save({}, 'daily');
    const listings = [await makeOpenListing(cast.ada.id), await makeOpenListing(cast.ada.id), await makeOpenListing(cast.ada.id)];
    for (const { id } of listings) await matchSearches(id, MARKET_AT);
    await withdrawListing(cast.ada, { number: listings[1]?.number ?? 0, reason: '' }, MARKET_AT);
    // 5:59 in the morning in Wisconsin, then 6:00.
    await tellSearches(new Date('2026-07-21T10:59:00Z'));
    expect(await letters()).toEqual([]);
    await Promise.all([1, 2, 3].map(() => tellSearches(new Date('2026-07-21T11:00:00Z'))));
    const [letter, ...others] = await letters();
    expect(others).toEqual([]);
    expect(letter?.subject).toBe('2 new listings: Near home');

    const late = await makeOpenListing(cast.ada.id);
    await matchSearches(late.id, new Date('2026-07-21T16:00:00Z'));
    await tellSearches(new Date('2026-07-21T20:00:00Z'));
    expect(await letters()).toHaveLength(1);
    await tellSearches(new Date('2026-07-22T11:30:00Z'));
    expect(await letters()).toHaveLength(2);
  });
});

describe('stopping', () => {
  it('takes the link of the letter alone, as often as one likes', async () => {
    await save();
    const listing = await makeOpenListing(cast.ada.id);
    await matchSearches(listing.id, MARKET_AT);
    const token = stopToken((await letters())[0]);
    for (const _ of [1, 2]) expect(await stopSearch(token, MARKET_AT)).toBe('Near home');
    await matchSearches((await makeOpenListing(cast.ada.id)).id, MARKET_AT);
    expect(await letters()).toHaveLength(1);
    await expect(stopSearch(`${token.slice(0, -2)}AA`, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(stopSearch('', MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
  });

  it('and changing are the sawyer’s own; taking a search away does not forget what was told', async () => {
    const id = await save();
    await expect(changeSearch(cast.cleo, id, 'stopped', MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(removeSearch(cast.ada, id, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    const listing = await makeOpenListing(cast.ada.id);
    await matchSearches(listing.id, MARKET_AT);
    expect(await savedSearches(cast.bram)).toMatchObject([{ name: 'Near home', tells: 'at-once', told: 1 }]);
    await removeSearch(cast.bram, id, MARKET_AT);
    await save();
    await matchSearches(listing.id, MARKET_AT);
    expect(await letters()).toHaveLength(1);
  });

  it('is not needed past twenty searches: no more are kept', async () => {
    for (let count = 0; count < 20; count += 1) await save();
    await expect(save()).rejects.toMatchObject({ kind: 'conflict' });
  });
});

it('what is listed by the form is found by its place', async () => {
  await save({ from: { point: { lat: 43.5561, lng: -90.8884 }, zip: '54665', radiusMi: 10 } });
  await matchSearches((await openListing(cast.ada)).id, LISTED_AT);
  expect((await letters())[0]?.text).not.toContain('43.55');
});
