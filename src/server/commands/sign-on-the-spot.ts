import { randomInt, timingSafeEqual } from 'node:crypto';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { execute, inTransaction, oneRow } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { Booking, SigningCode, Tally, TallyPart } from '../models/index.ts';
import { tallyWork } from '../tally-work.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { signWork } from './sign-tally.ts';

/** Wrong codes after which only the landowner's own account signs. */
const MOST_WRONG_TRIES = 5;
const CHANGED = 'The tally has changed since it was signed. Read it as it stands now, then sign again.';

/** The landowner's code for signing on the sawyer's phone, made when it is first asked for. */
export async function makeSigningCode(bookingId: string): Promise<string> {
  const code = String(randomInt(0, 1_000_000)).padStart(6, '0');
  await execute('INSERT INTO signing_code (booking_id, code) VALUES ($1, $2) ON CONFLICT (booking_id) DO NOTHING', [bookingId, code]);
  return (await SigningCode.findByPk(bookingId, { rejectOnEmpty: true })).code;
}

/** The same for the landowner to read. @throws Refusal `forbidden` for everybody else */
export async function signingCode(by: Viewer, number: number): Promise<string> {
  const booking = await Booking.findOne({ where: { number } });
  if (!booking) throw notFound('booking');
  authorize(by, 'booking', 'seeSigningCode', rolesOnBooking(by, booking), booking.status);
  return makeSigningCode(booking.id);
}

/** Counts a wrong code in a transaction of its own, so that the refusal does not undo the counting. */
async function checkCode(number: number, code: string | null): Promise<void> {
  const wrong = await inTransaction(async () => {
    const kept = await oneRow<{ id: string; code: string; tries: number }>(
      `SELECT booking.id, signing_code.code, signing_code.wrong_tries AS tries FROM booking JOIN signing_code ON signing_code.booking_id = booking.id WHERE booking.number = $1 FOR UPDATE OF signing_code`,
      [number],
    );
    if (!kept) return 'The landowner finds their code on their booking’s page. They can also sign there.';
    if (kept.tries >= MOST_WRONG_TRIES) return 'Too many wrong codes. The landowner signs on their own phone or at home.';
    if (code !== null && timingSafeEqual(Buffer.from(kept.code), Buffer.from(code))) return null;
    await execute('UPDATE signing_code SET wrong_tries = wrong_tries + 1 WHERE booking_id = $1', [kept.id]);
    return 'That is not the landowner’s code. It stands on their booking’s page and in the letter the evening before.';
  });
  if (wrong !== null) throw invalid([{ path: 'code', message: wrong }], wrong);
}

type Sign = Extract<TallyEntry, { kind: 'sign' }>;
type Part = Extract<TallyEntry, { kind: 'part' }>;

/**
 * The landowner signs the offered tally by name and finger: on their own phone, or with their code on the sawyer's. Signed without
 * signal, it is bound to what was on the screen; a tally that has changed since asks again.
 * @throws Refusal `invalid` for a wrong code or a missing signature, `conflict` for a tally that has changed
 */
export async function signOnTheSpot(by: Viewer, input: { readonly booking: number; readonly sign: Sign }, at: Date): Promise<void> {
  const { sign } = input;
  const before = await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    const roles = rolesOnBooking(by, booking);
    const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 } });
    if ((roles.has('sawyer') || roles.has('landowner')) && tally?.signedAt && tally.contentSha256 === sign.sha256) return 'signed';
    authorize(by, 'booking', 'signOnTheSpot', roles, booking.status);
    return roles.has('landowner') ? 'landowner' : 'sawyer';
  });
  if (before === 'signed') return;
  if (before === 'sawyer') {
    if (sign.signature === null) throw invalid([{ path: 'signature', message: 'On the sawyer’s phone the landowner signs with a finger.' }]);
    await checkCode(input.booking, sign.code);
  }
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'signOnTheSpot', rolesOnBooking(by, booking), booking.status);
    const work = await tallyWork(booking);
    if (!work || work.sha256 !== sign.sha256) throw conflict(CHANGED);
    await work.tally.update({ signature: sign.signature, signedOn: before });
    await signWork(booking, work, by, 'landowner', sign.name, at);
  });
}

/** The landowner signs the work so far when rain stops the saw: its lines stand, and the job goes on another day. */
export async function signPart(by: Viewer, input: { readonly booking: number; readonly part: Part }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    const { part } = input;
    const roles = rolesOnBooking(by, booking);
    if ((roles.has('sawyer') || roles.has('landowner')) && (await TallyPart.findByPk(part.id))) return;
    authorize(by, 'booking', 'signPart', roles, booking.status);
    const onPhoneOf = roles.has('landowner') ? 'landowner' : 'sawyer';
    if (onPhoneOf === 'sawyer' && part.signature === null) throw invalid([{ path: 'signature', message: 'On the sawyer’s phone the landowner signs with a finger.' }]);
    const work = await tallyWork(booking);
    if (!work || work.sha256 !== part.sha256) throw conflict(CHANGED);
    const lineIds = [...work.boards, ...work.hits, ...work.culls, ...work.clock].map(({ id }) => id);
    if (lineIds.length === 0) throw conflict('There is nothing in the tally yet.');
    await TallyPart.create({ id: part.id, tallyId: work.tally.id, lineIds, contentSha256: work.sha256, costCents: work.settlement.costCents, signedName: part.name, signature: part.signature, onPhoneOf, signedAt: at });
    await work.tally.update({ revision: work.tally.revision + 1 });
    await record(by, 'signPart', 'booking', booking.id, at, { data: { lines: lineIds.length, costCents: work.settlement.costCents, onPhoneOf } });
  });
}
