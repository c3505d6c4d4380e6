import { Op } from 'sequelize';
import { accessSaid, landingSaid, treeSaid } from '~/domain/listing/page-words.ts';
import type { Access, Landing, Waste } from '~/domain/listing/answers.ts';
import { abilities } from '~/domain/permissions.ts';
import { addHours, formatDayWithYear } from '~/domain/time.ts';
import type { DayBooking, DayPack } from '~/schemas/day.ts';
import { rolesOnBooking } from '../authorize.ts';
import { readyTheEveningBefore } from '~/domain/trade/evening-before.ts';
import { cutSheetKey } from '../cut-sheets.ts';
import { bookedDaysOf } from '../invitations.ts';
import { Booking, Listing, SigningCode } from '../models/index.ts';
import { otherParty, partiesOf } from '../parties.ts';
import { notePlaceSeen } from '../place-views.ts';
import { stickersOf } from '../stickers-of.ts';
import { tallyView } from '../tally-view.ts';
import { tallyWork } from '../tally-work.ts';
import type { Viewer } from '../viewer.ts';
import { exactPlace } from './listing-page.ts';

/** A phone keeps at most this many bookings: the nearest days first. */
const MOST = 20;
/** A settled booking stays on the phone this long, so that nobody wonders where it went. */
const SETTLED_KEPT_HOURS = 48;

async function dayBooking(viewer: Viewer, booking: Booking, at: Date): Promise<DayBooking> {
  const can = abilities('booking', rolesOnBooking({ ...viewer, isModerator: false }, booking), booking.status);
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const other = otherParty(await partiesOf(booking), viewer.id);
  const exact = can.seePlace && listing.place ? exactPlace(listing) : null;
  if (exact) await notePlaceSeen({ ...viewer, isModerator: false }, listing, at, { booking: booking.number });
  const { access, landing, waste } = listing;
  const side = viewer.id === booking.landownerId ? 'landowner' : 'sawyer';
  return {
    number: booking.number,
    title: listing.title ?? '',
    side,
    status: booking.status,
    otherName: other.name,
    otherEmail: other.email,
    town: [listing.town, listing.state].filter(Boolean).join(', '),
    place: exact ? { ...exact.point, directions: exact.directions } : null,
    days: await bookedDaysOf(booking.id),
    startsAt: booking.startsAt?.toISOString() ?? null,
    timeZone: booking.timeZone,
    tree: treeSaid({ howDown: listing.howDown ?? '', endsSealed: listing.endsSealed ?? false, metalRisk: listing.metalRisk ?? '', metalNote: listing.metalNote }, listing.cameDownOn ? formatDayWithYear(listing.cameDownOn) : ''),
    access: access ? accessSaid(access as unknown as Access) : [],
    landing: landing && waste ? landingSaid(landing as unknown as Landing, waste as unknown as Waste) : [],
    note: listing.note,
    ready: readyTheEveningBefore(side, await stickersOf(listing)),
    sheetKey: await cutSheetKey(booking),
    signingCode: viewer.id === booking.landownerId ? ((await SigningCode.findByPk(booking.id))?.code ?? null) : null,
    tally: await tallyView(booking, await tallyWork(booking)),
  };
}

/**
 * The bookings whose work lies ahead, is going on or waits for a signature, with everything a phone needs in a field without signal.
 * Leans on the indexes of `booking` by landowner and by sawyer.
 */
export async function dayPack(viewer: Viewer, at: Date): Promise<DayPack> {
  const status = { [Op.or]: [{ status: ['held', 'sawing', 'tallied', 'queried', 'signed'] }, { status: 'settled', updatedAt: { [Op.gt]: addHours(at, -SETTLED_KEPT_HOURS) } }] };
  const mine = await Booking.findAll({ where: { ...status, landownerId: viewer.id } });
  const asSawyer = await Booking.findAll({ where: { ...status, sawyerId: viewer.id } });
  const all = [...mine, ...asSawyer].sort((a, b) => (a.startsAt?.getTime() ?? 0) - (b.startsAt?.getTime() ?? 0)).slice(0, MOST);
  const bookings: DayBooking[] = [];
  for (const booking of all) bookings.push(await dayBooking(viewer, booking, at));
  return { account: { id: viewer.id, name: viewer.name }, at: at.toISOString(), bookings };
}
