import { formatFraction } from '~/domain/measure.ts';
import { formatCents } from '~/domain/money.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { MILL_KIND_NAMES } from '~/domain/trade/mill-fit.ts';
import { withUnit, type Line } from '~/domain/trade/price.ts';
import type { BidSort } from '~/domain/trade/comparison.ts';
import type { Waste } from '~/domain/trade/rate-card.ts';

/** `400 bf at $0.50`: how a line came about; nothing for a line that is only an amount. */
export function lineWords({ kind, quantity, unit, unitCents }: Line): string {
  const count = quantity.toLocaleString('en-US', { maximumFractionDigits: 2 });
  if (unit === '%') return `${count} % of ${formatCents(unitCents)}`;
  if (kind === 'minimum' || unit === 'job') return '';
  if (unit === 'each') return `${count} at ${formatCents(unitCents)}`;
  return `${withUnit(count, quantity, unit)} at ${formatCents(unitCents)}`;
}

/** `band, kerf 3/32 in` */
export const millWords = (mill: Pick<BidMill, 'kind' | 'kerfIn'>): string => `${MILL_KIND_NAMES[mill.kind]}, kerf ${formatFraction(mill.kerfIn, 32)} in`;

/** What becomes of slabs and sawdust, as a bid's choice. */
export const wasteChoices: Readonly<Record<Waste, string>> = { left: 'They stay at the landing', hauled: 'I haul them away', bundled: 'I bundle the slabs and leave them' };

/** `The logs and the access have changed.` */
export function changedWords(parts: readonly string[]): string {
  if (parts.length === 0) return 'Something it was worked out on has changed.';
  const named = parts.map((part) => (part === 'how it came down' ? 'how it came down' : `the ${part}`));
  const last = named.at(-1) ?? '';
  const list = named.length === 1 ? last : `${named.slice(0, -1).join(', ')} and ${last}`;
  return `${list.charAt(0).toUpperCase()}${list.slice(1)} changed.`;
}

/** `12 settled jobs` */
export const jobsWords = (count: number): string => (count === 0 ? 'no settled jobs yet' : count === 1 ? 'one settled job' : `${count} settled jobs`);

/** What a comparison can be ordered by, as its links say it. */
export const sortNames: Readonly<Record<BidSort, string>> = { estimate: 'estimate', perBf: 'cost per bf sawn', day: 'earliest open day', distance: 'distance' };
