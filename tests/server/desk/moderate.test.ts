import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { endSecondFactor } from '~/server/commands/end-second-factor.ts';
import { handleReport } from '~/server/commands/handle-report.ts';
import { hideListing, showListing } from '~/server/commands/hide-listing.ts';
import { hideMessage } from '~/server/commands/hide-message.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { reportThing } from '~/server/commands/report-thing.ts';
import { openConversation, sendMessage } from '~/server/commands/send-message.ts';
import { execute, rows } from '~/server/db.ts';
import { Account, Event, Listing, Message, Report } from '~/server/models/index.ts';
import { conversationPage } from '~/server/queries/conversations.ts';
import { listingPage } from '~/server/queries/listing-page.ts';
import { openSession, viewerOf } from '~/server/sessions.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../../support/sawing-market.ts';

let cast: Cast;
let mill: string;
let listing: Listing;
const at = MARKET_AT;
const subjects = async (email: string): Promise<string[]> => (await rows<{ subject: string }>(`SELECT data->>'subject' AS subject FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 ORDER BY created_on, id`, [email])).map(({ subject }) => subject);

beforeAll(async () => {
  cast = await makeCast();
  mill = await setUpSawyer(cast.bram.id);
});
beforeEach(async () => {
  await execute('DELETE FROM rate_limit');
  listing = await makeOpenListing(cast.ada.id);
});

describe('a hidden listing', () => {
  it('is read by its owner with the reason and by moderators, takes no bid, and no bid of it is chosen', async () => {
    const bid = await placeBid(cast.bram, listing.number, bidOf(mill), at);
    await hideListing(cast.mo, { number: listing.number, reason: 'The photographs are not yours.' }, at);
    expect((await listingPage(cast.ada, listing.number)).hiddenBecause).toBe('The photographs are not yours.');
    expect((await listingPage(cast.mo, listing.number)).hiddenBecause).toBe('The photographs are not yours.');
    for (const reader of [null, cast.bram, cast.dora]) await expect(listingPage(reader, listing.number)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(placeBid(cast.bram, listing.number, bidOf(mill), at)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(chooseBid(cast.ada, bid, 1, at)).rejects.toMatchObject({ kind: 'conflict' });
    await showListing(cast.mo, listing.number, at);
    expect((await listingPage(null, listing.number)).hiddenBecause).toBeNull();
    expect(await chooseBid(cast.ada, bid, 1, at)).toBeGreaterThan(5000);
    expect((await subjects(cast.ada.email)).filter((subject) => /^(Hidden|Shown again): White oak/.test(subject))).toHaveLength(2);
  });

  it('is hidden once of eight at once, by moderators only', async () => {
    for (const other of [cast.ada, cast.bram]) await expect(hideListing(other, { number: listing.number, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(hideListing({ ...cast.mo, isModerator: false, secondFactorDue: true }, { number: listing.number, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => hideListing(cast.mo, { number: listing.number, reason: 'x' }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await Event.count({ where: { thing: 'listing', thingId: listing.id, action: 'hide' } })).toBe(1);
    await expect(showListing(cast.ada, listing.number, at)).rejects.toMatchObject({ kind: 'forbidden' });
  });
});

describe('reports', () => {
  const report = (by: Cast['ada'] | null, thing: 'listing' | 'message' | 'account', thingId: string) => reportThing(by, { thing, thingId, reason: 'scam', note: 'See for yourself.', clientAddress: '192.0.2.7' }, at);

  it('come from anyone for a listing, once while the first waits, and are handled once of eight at once', async () => {
    await report(null, 'listing', listing.id);
    await report(null, 'listing', listing.id);
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => report(cast.bram, 'listing', listing.id)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'conflict' });
    expect(await Report.count({ where: { thingId: listing.id } })).toBe(3);
    const waiting = await Report.findOne({ where: { thingId: listing.id, reporterId: cast.bram.id }, rejectOnEmpty: true });
    await expect(handleReport(cast.ada, { report: waiting.id, outcome: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    const handled = await Promise.allSettled(Array.from({ length: 8 }, () => handleReport(cast.mo, { report: waiting.id, outcome: 'Hidden.' }, at)));
    expect(handled.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await Report.findByPk(waiting.id)).toMatchObject({ outcome: 'Hidden.', handledBy: cast.mo.id });
    expect(await subjects(cast.bram.email)).toContain('We have looked at your report');
    await report(cast.bram, 'listing', listing.id);
    expect(await Report.count({ where: { thingId: listing.id, reporterId: cast.bram.id, handledAt: null } })).toBe(1);
  });

  it('are only about what the reporter can see, and never about oneself', async () => {
    await expect(report(cast.ada, 'listing', listing.id)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(report(cast.ada, 'account', cast.ada.id)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(report(null, 'account', cast.ada.id)).rejects.toMatchObject({ kind: 'signedOut' });
    await expect(report(cast.bram, 'listing', 'nonsense')).rejects.toMatchObject({ kind: 'notFound' });
    await listing.update({ hiddenAt: at });
    await expect(report(cast.bram, 'listing', listing.id)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(report({ ...cast.bram, active: false }, 'account', cast.ada.id)).rejects.toMatchObject({ kind: 'forbidden' });
    await report(cast.bram, 'account', cast.ada.id);
  });

  it('of a message come from its reader; a moderator takes it out of the conversation for both', async () => {
    const { id } = await openConversation(cast.bram, listing.number, at);
    await sendMessage(cast.bram, { conversation: id, body: 'Send me cash.' }, at);
    const message = await Message.findOne({ where: { conversationId: id }, rejectOnEmpty: true });
    for (const other of [cast.bram, cast.dora, null]) await expect(report(other, 'message', message.id)).rejects.toMatchObject({ kind: other ? 'notFound' : 'signedOut' });
    await report(cast.ada, 'message', message.id);
    await expect(hideMessage(cast.ada, { message: message.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await hideMessage(cast.mo, { message: message.id, reason: 'Asks for cash.' }, at);
    for (const reader of [cast.ada, cast.bram]) expect((await conversationPage(reader, id)).messages).toEqual([]);
    await expect(hideMessage(cast.mo, { message: message.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('by one person are counted', async () => {
    for (let n = 0; n < 20; n += 1) await report(null, 'listing', listing.id);
    await expect(report(null, 'listing', listing.id)).rejects.toMatchObject({ kind: 'tooMany' });
    await report(cast.dora, 'listing', listing.id);
  });
});

describe('the second factor of someone who lost it', () => {
  it('is ended by a moderator with every session, and the owner is told', async () => {
    await Account.update({ totpSecret: 'sealed', totpConfirmedAt: at, totpLastStep: 5 }, { where: { id: cast.cleo.id } });
    const { value } = await openSession(cast.cleo.id, 'test');
    await expect(endSecondFactor(cast.bram, { account: cast.cleo.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(endSecondFactor(cast.mo, { account: cast.mo.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await endSecondFactor(cast.mo, { account: cast.cleo.id, reason: 'Known by telephone.' }, at);
    expect((await viewerOf(value)).viewer).toBeNull();
    expect(await Account.findByPk(cast.cleo.id)).toMatchObject({ totpSecret: null, totpConfirmedAt: null, totpLastStep: null });
    expect(await subjects(cast.cleo.email)).toContain('Signing in no longer asks for a code');
    await expect(endSecondFactor(cast.mo, { account: cast.cleo.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'conflict' });
  });
});
