import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { blockAccount, unblockAccount } from '~/server/commands/block-account.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { endSecondFactor } from '~/server/commands/end-second-factor.ts';
import { handleReport } from '~/server/commands/handle-report.ts';
import { hideListing, showListing } from '~/server/commands/hide-listing.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { reportThing } from '~/server/commands/report-thing.ts';
import { openConversation, sendMessage } from '~/server/commands/send-message.ts';
import { takeOut } from '~/server/commands/take-out.ts';
import { execute, rows } from '~/server/db.ts';
import { Account, Event, Listing, Message, Photo, Report, Review } from '~/server/models/index.ts';
import { accountPage } from '~/server/queries/account.ts';
import { conversationPage } from '~/server/queries/conversations.ts';
import { deskReport } from '~/server/queries/desk/reports.ts';
import { listingPage } from '~/server/queries/listing-page.ts';
import { photoAudience } from '~/server/queries/photos.ts';
import { reportable, type ReportableThing } from '~/server/queries/report-page.ts';
import { sawyerPage } from '~/server/queries/sawyer-page.ts';
import { openSession, viewerOf } from '~/server/sessions.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeAccount, makeCast, type Cast, viewerFor } from '../../support/cast.ts';
import { makeAgreedBooking } from '../../support/money-market.ts';
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
  const report = (by: Cast['ada'] | null, thing: ReportableThing, thingId: string) => reportThing(by, { thing, thingId, reason: 'scam', note: 'See for yourself.', clientAddress: '192.0.2.7' }, at);

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
    await expect(takeOut(cast.ada, { thing: 'message', id: message.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await takeOut(cast.mo, { thing: 'message', id: message.id, reason: 'Asks for cash.' }, at);
    for (const reader of [cast.ada, cast.bram]) expect((await conversationPage(reader, id)).messages).toEqual([]);
    await expect(takeOut(cast.mo, { thing: 'message', id: message.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('tell a stranger no more than the first name of whoever is not in public', async () => {
    const olga = await viewerFor((await makeAccount({ name: 'Olga Oakley', landowner: true })).id);
    const sid = await viewerFor((await makeAccount({ name: 'Sid Sawyer', sawyer: true })).id);
    const listing = await makeOpenListing(olga.id);
    const told = async (by: Viewer, thing: 'listing' | 'account', id: string): Promise<string | undefined> => (await reportable(by, thing, id))?.person?.name;
    const blocks = async (by: Viewer): Promise<readonly string[]> => (await accountPage(by)).blocked.map(({ name }) => name);
    expect([await told(sid, 'listing', listing.id), await told(sid, 'account', olga.id), await told(olga, 'account', sid.id)]).toEqual(['Olga', 'Olga', 'Sid Sawyer']);
    await blockAccount(sid, olga.id, at);
    expect(await blocks(sid)).toEqual(['Olga']);
    await unblockAccount(sid, olga.id, at);
    await openConversation(sid, listing.number, at);
    expect(await told(sid, 'listing', listing.id)).toBe('Olga Oakley');
    await blockAccount(sid, olga.id, at);
    expect(await blocks(sid)).toEqual(['Olga Oakley']);
  });

  it('of a review come from those who read it; taken out, it counts no more', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    const review = (stars: number, body: string) => Review.create({ bookingId: booking.id, authorId: cast.ada.id, subjectId: cast.bram.id, stars, body, createdAt: at });
    const rude = await review(1, 'He lives at the yellow house.');
    await expect(report(null, 'review', rude.id)).rejects.toMatchObject({ kind: 'signedOut' });
    await expect(report(cast.ada, 'review', rude.id)).rejects.toMatchObject({ kind: 'notFound' });
    // The other way round, a review of a landowner is read by the two of its booking only.
    const ofAda = await Review.create({ bookingId: booking.id, authorId: cast.bram.id, subjectId: cast.ada.id, stars: 4, body: '', createdAt: at });
    expect(await reportable(cast.dora, 'review', ofAda.id)).toBeNull();
    expect(await reportable(cast.ada, 'review', ofAda.id)).toMatchObject({ title: '4 of 5', person: { id: cast.bram.id } });
    expect(await reportable(cast.dora, 'review', rude.id)).toMatchObject({ title: '1 of 5\nHe lives at the yellow house.' });
    await report(cast.bram, 'review', rude.id);
    const waiting = await Report.findOne({ where: { thingId: rude.id }, rejectOnEmpty: true });
    expect(await deskReport(cast.mo, waiting.id)).toMatchObject({ about: '1 of 5:\nHe lives at the yellow house.', personName: 'Ada', isOut: false });
    expect(await sawyerPage(cast.bram.id, null, at)).toMatchObject({ reviewCount: 1, meanStars: 1 });
    await expect(takeOut(cast.bram, { thing: 'review', id: rude.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => takeOut(cast.mo, { thing: 'review', id: rude.id, reason: 'It says where he lives.' }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await sawyerPage(cast.bram.id, null, at)).toMatchObject({ reviewCount: 0, meanStars: null, reviews: [] });
    expect((await deskReport(cast.mo, waiting.id)).isOut).toBe(true);
    expect(await reportable(cast.bram, 'review', rude.id)).toBeNull();
    expect((await subjects(cast.ada.email)).filter((subject) => subject === 'A review of yours was taken out')).toHaveLength(1);
  });

  it('of a photograph come from those who see it; taken out, nobody does', async () => {
    const photo = await Photo.create({ listingId: listing.id, ownerId: cast.ada.id, position: 1, caption: 'Not my tree', originalKey: `private/${listing.id}`, status: 'ready', width: 800, height: 600, blur: '', createdAt: at });
    await expect(report(cast.ada, 'photo', photo.id)).rejects.toMatchObject({ kind: 'notFound' });
    await report(null, 'photo', photo.id);
    expect(await reportable(cast.bram, 'photo', photo.id)).toMatchObject({ title: 'Not my tree', picture: { width: 800 } });
    const waiting = await Report.findOne({ where: { thingId: photo.id }, rejectOnEmpty: true });
    expect(await deskReport(cast.mo, waiting.id)).toMatchObject({ about: listing.title, listing: listing.number, picture: { width: 800 } });
    await takeOut(cast.mo, { thing: 'photo', id: photo.id, reason: 'It shows a neighbour.' }, at);
    for (const reader of [null, cast.ada, cast.mo]) await expect(photoAudience(reader, photo.id)).rejects.toMatchObject({ kind: 'notFound' });
    expect(await deskReport(cast.mo, waiting.id)).toMatchObject({ isOut: true, picture: null });
    await expect(takeOut(cast.mo, { thing: 'photo', id: photo.id, reason: 'x' }, at)).rejects.toMatchObject({ kind: 'conflict' });
    // One of a listing that is hidden cannot be seen, nor reported.
    const other = await Photo.create({ listingId: listing.id, ownerId: cast.ada.id, position: 2, caption: '', originalKey: `private/${listing.id}/2`, status: 'ready', width: 800, height: 600, blur: '', createdAt: at });
    await listing.update({ hiddenAt: at });
    expect(await reportable(cast.bram, 'photo', other.id)).toBeNull();
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
