import type { Defect } from '~/domain/timber/defects.ts';
import type { DayLog } from '~/domain/trade/day-logs.ts';
import type { MillLimits } from '~/domain/trade/mill-fit.ts';
import type { BidOfDay } from '~/domain/trade/day-estimate.ts';
import type { FrozenEstimate } from './bid-work.ts';
import { Bid, DayAllowance, MeasuredLog, type Booking, type Log } from './models/index.ts';

const limitNames = ['largestLogIn', 'widestCutIn', 'widestBoardIn', 'longestFt', 'shortestFt'] as const;

/** The limits of the mill that the booking's bid froze; null for a bid without a mill. */
export async function frozenMill(booking: Booking): Promise<MillLimits | null> {
  const mill = (await Bid.findByPk(booking.bidId, { rejectOnEmpty: true })).mill as Partial<MillLimits>;
  const [largestLogIn, widestCutIn, widestBoardIn, longestFt, shortestFt] = limitNames.map((name) => mill[name]);
  if (largestLogIn === undefined || widestCutIn === undefined || widestBoardIn === undefined || longestFt === undefined || shortestFt === undefined) return null;
  return { largestLogIn, widestCutIn, widestBoardIn, longestFt, shortestFt };
}

/** What the bid froze of its estimate; null for a bid without one. */
export async function bidOfDay(booking: Booking): Promise<BidOfDay | null> {
  const { estimate, mill } = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
  const { options, estimate: frozen } = estimate as Partial<FrozenEstimate>;
  const { paceBfPerHour } = mill as { readonly paceBfPerHour?: number };
  return frozen?.lumber && paceBfPerHour ? { lumberBf: frozen.lumber.bf, options: options ?? {}, paceBfPerHour } : null;
}

/** The logs of a job as they lie on the day: listed, measured again, added, agreed. In their order. */
export async function dayLogs(booking: Booking, logs: readonly Log[]): Promise<DayLog[]> {
  const measured = new Map((await MeasuredLog.findAll({ where: { bookingId: booking.id } })).map((one) => [one.logId, one]));
  const accepted = new Set((await DayAllowance.findAll({ where: { bookingId: booking.id, what: 'added-log' }, attributes: ['logId'] })).map(({ logId }) => logId));
  return logs.map((log) => {
    const again = measured.get(log.id);
    return {
      id: log.id,
      species: log.species,
      defects: log.defects as Defect[],
      listed: { smallEndIn: log.smallEndIn, largeEndIn: log.largeEndIn, lengthFt: log.lengthFt },
      measured: again ? { smallEndIn: again.smallEndIn, largeEndIn: again.largeEndIn, lengthFt: again.lengthFt } : null,
      added: log.addedOnTheDay,
      agreed: log.addedOnTheDay ? accepted.has(log.id) : (again?.agreedAt ?? null) !== null,
    };
  });
}
