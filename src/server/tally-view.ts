import { formatInches } from '~/domain/measure.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import { NO_EXTRAS } from '~/domain/trade/tally-count.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { TallyQueryView, TallyView } from '~/schemas/tally-view.ts';
import { env } from './env.ts';
import { type Booking, type Log, Piece, TallyQuery } from './models/index.ts';
import { frozenTerms, heldCentsOf, jobLogs, type TallyWork } from './tally-work.ts';

const tallyLog = (log: Log, index: number): TallyView['logs'][number] => ({
  ...logToCharge({ id: log.id, species: log.species, smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }), defects: log.defects as Defect[] }),
  label: log.label || `Log ${index + 1}`,
  speciesName: speciesOf(log.species).name,
  size: `${formatInches(log.smallEndIn)} × ${Math.floor(log.lengthFt)} ft`,
  wholeFt: Math.floor(log.lengthFt + 1e-9),
});

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
  const pieces = await Piece.findAll({ where: { listingId: booking.listingId }, order: [['position', 'ASC']] });
  const queries = work ? await queriesOf(work) : [];
  return {
    booking: booking.number,
    status: booking.status,
    revision: work?.tally.revision ?? 0,
    terms,
    heldCents: work?.heldCents ?? (await heldCentsOf(booking.id)),
    feeBasisPoints: env().FEE_BASIS_POINTS,
    logs: logs.map(tallyLog),
    cutList: pieces.map(({ label, thicknessIn, widthIn, lengthFt, count }) => ({ label, thicknessIn, widthIn, lengthFt, count })),
    boards: (work?.boards ?? []).map(({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count }) => ({ id, logId, kind, thicknessIn, widthIn, secondWidthIn, lengthFt, count })),
    hits: (work?.hits ?? []).map(({ id, logId, outcome, note }) => ({ id, logId, outcome, note })),
    culls: (work?.culls ?? []).map(({ id, logId, reason, openingMinutes, passes }) => ({ id, logId, reason, openingMinutes, passes })),
    clock: work?.clock ?? [],
    extras: work?.job.extras ?? { ...NO_EXTRAS, wasteDone: terms.waste },
    metalAllowed: work?.tally.metalAllowed ?? 0,
    queries: queries.map((query) => ({ id: query.id, line: query.line, lineId: query.lineId, says: query.says, answer: query.answer, decision: query.decision as TallyQueryView['decision'], because: query.decidedBecause })),
  };
}
