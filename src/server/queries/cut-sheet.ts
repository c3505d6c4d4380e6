import { patternOf } from '~/domain/sawing/pattern-words.ts';
import { abilities } from '~/domain/permissions.ts';
import type { CutSheetView } from '~/schemas/cut-sheet.ts';
import { rolesOnBooking } from '../authorize.ts';
import { cutSheetOf, cutSheetView } from '../cut-sheets.ts';
import { notFound, signedOut } from '../errors.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import type { Viewer } from '../viewer.ts';

/** The booking, for its two sides and moderators. @throws Refusal `notFound` for everybody else */
async function bookingFor(viewer: Viewer, number: number): Promise<Booking> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking || !abilities('booking', rolesOnBooking(viewer, booking), booking.status).see) throw notFound('booking');
  return booking;
}

/**
 * The cut sheet of a booking, for its two sides and moderators: each log's plan on the mill that comes, as it is cut.
 * @param asked how boards are sawn; anything unknown leaves it to the planner
 * @throws Refusal `notFound` for everybody else
 */
export async function cutSheetPage(viewer: Viewer | null, number: number, asked: string | null) {
  if (!viewer) throw signedOut();
  const booking = await bookingFor(viewer, number);
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const pattern = patternOf(asked);
  return { number, title: listing.title ?? '', pattern, ...(await cutSheetOf(booking, pattern)) };
}

export type CutSheetPage = Awaited<ReturnType<typeof cutSheetPage>>;

/** The same as a phone keeps it. @throws Refusal `notFound` for everybody else */
export const keptCutSheet = async (viewer: Viewer, number: number): Promise<CutSheetView> => cutSheetView(await bookingFor(viewer, number));
