import type { Cents } from '~/domain/money.ts';
import type { BidTerms } from './rate-card.ts';

/** A log that scales more than this over the listing stops the saw until both agree. */
export const LARGER_LOG_TOLERANCE_PCT = 15;
/** Metal hits after which sawing stops until the landowner allows more. */
export const METAL_HITS_BEFORE_STOP = 2;

export type HoldWarning = 'none' | 'at-80' | 'at-95' | 'stop';

/**
 * How near the cost so far is to the limit (the hold, and any increase the landowner has signed for).
 * At 80 and 95 % both are warned; at 100 % sawing stops until the landowner allows more.
 */
export function holdWarning(costSoFarCents: Cents, limitCents: Cents): HoldWarning {
  if (costSoFarCents >= limitCents) return 'stop';
  if (costSoFarCents * 100 >= limitCents * 95) return 'at-95';
  return costSoFarCents * 100 >= limitCents * 80 ? 'at-80' : 'none';
}

/** Whether sawing may go on after this many metal hits, given how many more the landowner has allowed beyond two. */
export const mayGoOnAfterMetal = (hits: number, allowedMore: number): boolean => hits < METAL_HITS_BEFORE_STOP + allowedMore;

/** A log as listed and as measured on the day, both in board feet of one rule. */
export interface RemeasuredLog {
  readonly id: string;
  readonly listedBf: number;
  readonly measuredBf: number;
  /** Why it is over the mill's limits, as `fitLog` says; empty when it fits. */
  readonly overLimits: readonly string[];
}

export interface LargerLogs {
  readonly listedBf: number;
  readonly measuredBf: number;
  /** Positive when more than listed. */
  readonly jobChangePct: number;
  /** Why both must see and agree before sawing. Empty: saw on. */
  readonly reasons: readonly string[];
}

/** Compares the logs measured on the day with the listing. Only more than listed asks for agreement: less simply costs less. */
export function largerLogs(logs: readonly RemeasuredLog[]): LargerLogs {
  const listedBf = logs.reduce((sum, { listedBf: bf }) => sum + bf, 0);
  const measuredBf = logs.reduce((sum, { measuredBf: bf }) => sum + bf, 0);
  const jobChangePct = changePct(listedBf, measuredBf);
  const reasons = [
    ...(isLarger(listedBf, measuredBf) ? [`The job scales ${jobChangePct.toFixed(1)} % more than listed.`] : []),
    ...logs.flatMap(({ id, listedBf: from, measuredBf: to, overLimits }) => [
      ...(isLarger(from, to) ? [`${id} scales ${changePct(from, to).toFixed(1)} % more than listed.`] : []),
      ...overLimits.map((why) => `${id}: ${why}`),
    ]),
  ];
  return { listedBf, measuredBf, jobChangePct, reasons };
}

// In whole products, so that exactly 15 % is never over by a binary fraction.
const isLarger = (from: number, to: number): boolean => to * 100 > from * (100 + LARGER_LOG_TOLERANCE_PCT);
const changePct = (from: number, to: number): number => (from === 0 ? (to === 0 ? 0 : 100) : (to / from - 1) * 100);

export type BladeCause = 'metal' | 'dulling' | 'dirt';
export interface BladeEvent {
  readonly blade: 're-sharpened' | 'destroyed';
  readonly cause: BladeCause;
}

/** Blades the landowner pays for: metal always; dulling and dirt only when the logs were dragged. */
export function chargedBlades(events: readonly BladeEvent[], logsWereDragged: boolean): { readonly bladesResharpened: number; readonly bladesDestroyed: number } {
  const charged = events.filter(({ cause }) => cause === 'metal' || logsWereDragged);
  const destroyed = charged.filter(({ blade }) => blade === 'destroyed').length;
  return { bladesResharpened: charged.length - destroyed, bladesDestroyed: destroyed };
}

/** Journeys charged when rain sends the sawyer home and back `returns` times: again only when the card says so. */
export const tripsAfterRain = (terms: BidTerms, returns: number): number => 1 + (terms.card.travel.owedAgainAfterRain ? returns : 0);

/** Set-ups charged: one per landing, and again after rain only as often as both agreed. */
export const setUpsAfterRain = (terms: BidTerms, agreedAgain: number): number => terms.landings + agreedAgain;
