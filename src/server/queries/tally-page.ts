import { formatInches } from '~/domain/measure.ts';
import { abilities, type Action } from '~/domain/permissions.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { TallyQueryView, TallyView } from '~/schemas/tally-view.ts';
import { rolesOnBooking } from '../authorize.ts';
import { env } from '../env.ts';
import { notFound } from '../errors.ts';
import { Booking, Listing, type Log, Piece, TallyQuery } from '../models/index.ts';
import { partiesOf } from '../parties.ts';
import { tallyWork } from '../tally-work.ts';
import type { Viewer } from '../viewer.ts';

export interface TallyPage {
  readonly number: number;
  readonly title: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly timeZone: string;
  readonly signBy: Date | null;
  readonly offeredAt: Date | null;
  readonly signedAt: Date | null;
  readonly signedBy: string | null;
  readonly signedName: string | null;
  readonly note: string;
  readonly sha256: string;
  /** As signed, or as it would come to now. */
  readonly settlement: Settlement;
  readonly view: TallyView;
  readonly can: Record<Action<'booking'>, boolean>;
}

const tallyLog = (log: Log, index: number): TallyView['logs'][number] => ({
  ...logToCharge({ id: log.id, species: log.species, smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }), defects: log.defects as Defect[] }),
  label: log.label || `Log ${index + 1}`,
  speciesName: speciesOf(log.species).name,
  size: `${formatInches(log.smallEndIn)} × ${Math.floor(log.lengthFt)} ft`,
  wholeFt: Math.floor(log.lengthFt + 1e-9),
});

/**
 * The tally of a booking for its two sides and moderators.
 * @throws Refusal `notFound` for others, and while no tally has been begun
 */
export async function tallyPage(viewer: Viewer, number: number): Promise<TallyPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking) throw notFound('booking');
  const can = abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!can.see) throw notFound('booking');
  const work = await tallyWork(booking);
  if (!work) throw notFound('tally: sawing has not begun');
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const pieces = await Piece.findAll({ where: { listingId: listing.id }, order: [['position', 'ASC']] });
  const lineIds = [...work.boards, ...work.hits, ...work.culls, ...work.clock].map((line) => line.id);
  const asked = await TallyQuery.findAll({ where: { tallyId: work.tally.id }, order: [['createdAt', 'ASC'], ['id', 'ASC']] });
  // Lines queried in one go stand as they stand in the tally; what is about the whole comes last.
  const place = (query: TallyQuery): number => (query.lineId === null ? lineIds.length : lineIds.indexOf(query.lineId));
  const queries = asked.sort((one, other) => one.createdAt.getTime() - other.createdAt.getTime() || place(one) - place(other));
  const { landowner, sawyer } = await partiesOf(booking);
  return {
    number: booking.number,
    title: listing.title ?? '',
    side: viewer.id === booking.landownerId ? 'landowner' : viewer.id === booking.sawyerId ? 'sawyer' : 'moderator',
    landownerName: landowner.name,
    sawyerName: sawyer.name,
    timeZone: booking.timeZone,
    signBy: booking.signBy,
    offeredAt: work.tally.offeredAt,
    signedAt: work.tally.signedAt,
    signedBy: work.tally.signedBy,
    signedName: work.tally.signedName,
    note: work.tally.note,
    sha256: work.sha256,
    settlement: work.tally.settlement ? (work.tally.settlement as Settlement) : work.settlement,
    view: {
      booking: booking.number,
      status: booking.status,
      revision: work.tally.revision,
      terms: work.terms,
      heldCents: work.heldCents,
      feeBasisPoints: env().FEE_BASIS_POINTS,
      logs: work.logs.map(tallyLog),
      cutList: pieces.map(({ label, thicknessIn, widthIn, lengthFt, count }) => ({ label, thicknessIn, widthIn, lengthFt, count })),
      boards: work.boards.map(({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count }) => ({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count })),
      hits: work.hits.map(({ id, logId, outcome, note }) => ({ id, logId, outcome, note })),
      culls: work.culls.map(({ id, logId, reason, openingMinutes, passes }) => ({ id, logId, reason, openingMinutes, passes })),
      clock: work.clock,
      extras: work.job.extras,
      metalAllowed: work.tally.metalAllowed,
      queries: queries.map((query) => ({ id: query.id, line: query.line, lineId: query.lineId, says: query.says, answer: query.answer, decision: query.decision as TallyQueryView['decision'], because: query.decidedBecause })),
    },
    can,
  };
}
