import { NO_EXTRAS } from '~/domain/trade/tally-count.ts';
import { tallyLog } from '~/schemas/tally-log.ts';
import type { TallyQueryView, TallyView } from '~/schemas/tally-view.ts';
import { env } from './env.ts';
import { dayPhotos } from './day-photos.ts';
import { bidOfDay, dayLogs, frozenMill } from './day-logs.ts';
import { type Booking, Piece, TallyQuery } from './models/index.ts';
import { frozenTerms, heldCentsOf, jobLogs, type TallyWork } from './tally-work.ts';

/** Queries by when they were sent; those sent in one go stand as their lines stand in the tally, what is about the whole last. */
async function queriesOf(work: TallyWork): Promise<TallyQuery[]> {
  const lineIds = [...work.boards, ...work.hits, ...work.culls, ...work.clock].map(({ id }) => id);
  const place = ({ lineId }: TallyQuery): number => (lineId === null ? lineIds.length : lineIds.indexOf(lineId));
  const asked = await TallyQuery.findAll({ where: { tallyId: work.tally.id }, order: [['createdAt', 'ASC'], ['id', 'ASC']] });
  return asked.sort((one, other) => one.createdAt.getTime() - other.createdAt.getTime() || place(one) - place(other));
}

/** Everything the tally book needs to count by itself, with or without signal; `work` is null before sawing has begun. */
export async function tallyView(booking: Booking, work: TallyWork | null): Promise<TallyView> {
  const terms = work?.terms ?? (await frozenTerms(booking));
  const logs = work?.logs ?? (await jobLogs(booking));
  const onTheDay = work?.onTheDay ?? (await dayLogs(booking, logs));
  const mill = work?.mill ?? (await frozenMill(booking));
  const pieces = await Piece.findAll({ where: { listingId: booking.listingId }, order: [['position', 'ASC']] });
  const queries = work ? await queriesOf(work) : [];
  return {
    booking: booking.number,
    status: booking.status,
    revision: work?.tally.revision ?? 0,
    terms,
    heldCents: work?.heldCents ?? (await heldCentsOf(booking.id)),
    feeBasisPoints: env().FEE_BASIS_POINTS,
    logs: onTheDay.map((log, index) => tallyLog(log, logs[index]?.label || `Log ${index + 1}`, mill)),
    cutList: pieces.map(({ label, thicknessIn, widthIn, lengthFt, count }) => ({ label, thicknessIn, widthIn, lengthFt, count })),
    boards: (work?.boards ?? []).map(({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count }) => ({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count })),
    hits: (work?.hits ?? []).map(({ id, logId, outcome, note }) => ({ id, logId, outcome, note })),
    culls: (work?.culls ?? []).map(({ id, logId, reason, openingMinutes, passes }) => ({ id, logId, reason, openingMinutes, passes })),
    clock: work?.clock ?? [],
    extras: work?.job.extras ?? { ...NO_EXTRAS, wasteDone: terms.waste },
    metalAllowed: work?.tally.metalAllowed ?? 0,
    allowances: (work?.allowances ?? []).map(({ id, what, logId, limitCents, signedName }) => ({ id, what, logId, limitCents, name: signedName })),
    parts: (work?.parts ?? []).map(({ id, signedName, lineIds, costCents }) => ({ id, name: signedName, lineIds, costCents })),
    photos: (await dayPhotos(booking.id)).map(({ id, shows, hitId }) => ({ id, shows, hitId })),
    mill,
    bid: await bidOfDay(booking),
    endedBySawyer: work?.tally.endedBySawyer ?? false,
    queries: queries.map((query) => ({ id: query.id, line: query.line, lineId: query.lineId, says: query.says, answer: query.answer, decision: query.decision as TallyQueryView['decision'], because: query.decidedBecause })),
  };
}
