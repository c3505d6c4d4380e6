import { formatCents, formatDollars } from '~/domain/money.ts';
import { formatDay } from '~/domain/time.ts';
import { costParts } from '~/domain/trade/comparison.ts';
import type { Line } from '~/domain/trade/price.ts';
import { chargedMiles } from '~/domain/trade/price.ts';
import { describeBasis, describeMinimum, describeRate } from '~/domain/trade/rate-card.ts';
import { coverWords } from '~/domain/trade/list-cover.ts';
import type { ComparedBid } from '~/server/queries/compare-bids.ts';
import { lineWords, millWords } from './words.ts';

/** What a bid says in one row of the comparison. `figure` sets it in the face of figures; `mark` says in a word where it stands. */
export interface Cell {
  readonly text: string;
  readonly note?: string | undefined;
  readonly mark?: string | undefined;
  readonly figure: boolean;
}

export interface ComparedRow {
  readonly label: string;
  readonly note?: string | undefined;
  readonly strong?: boolean | undefined;
  readonly cells: readonly Cell[];
}

const figure = (text: string, note?: string): Cell => ({ text, note: note === '' ? undefined : note, figure: true });
const words = (text: string, note?: string): Cell => ({ text, note: note === '' ? undefined : note, figure: false });
const bf = (value: number): string => Math.round(value).toLocaleString('en-US');
const linesOf = ({ frozen }: ComparedBid, ...kinds: readonly Line['kind'][]): readonly Line[] => frozen.estimate.quote.expected.lines.filter(({ kind }) => kinds.includes(kind));
const card = ({ frozen }: ComparedBid) => frozen.terms.card;
const parts = ({ frozen }: ComparedBid) => costParts(frozen.estimate.quote.expected);

/** Marks the least of a row among the bids that can be chosen, when they are not all alike. */
function marking(bids: readonly ComparedBid[], value: (bid: ComparedBid) => number | string | null, word: string): (bid: ComparedBid, cell: Cell) => Cell {
  const open = bids.filter(({ status }) => status === 'open').flatMap((bid) => value(bid) ?? []);
  const least = [...open].sort((a, b) => (typeof a === 'number' && typeof b === 'number' ? a - b : String(a).localeCompare(String(b))))[0];
  const telling = new Set(open).size > 1;
  return (bid, cell) => (telling && bid.status === 'open' && value(bid) === least ? { ...cell, mark: word } : cell);
}

const best = ({ frozen }: ComparedBid): number | undefined => frozen.estimate.lumber.best?.expected;

function setUpAndTravel(bid: ComparedBid): Cell {
  const { setUpCents, travelCents } = bid.frozen.estimate.quote.expected;
  const miles = chargedMiles(card(bid), bid.frozen.terms.roadMiles);
  return figure(travelCents === 0 ? formatCents(setUpCents) : `${formatCents(setUpCents)} + ${formatCents(travelCents)}`, miles === 0 ? 'no travel charged' : `${miles} miles, both ways beyond the free ones`);
}

function surcharges(bid: ComparedBid): Cell {
  const lines = linesOf(bid, 'surcharge', 'extra');
  return lines.length === 0 ? words('none') : figure(formatCents(parts(bid).surchargesAndExtras), lines.map((line) => `${line.label} ${formatCents(line.amountCents)}`).join('; '));
}

function minimum(bid: ComparedBid): Cell {
  const { minimum: added } = parts(bid);
  return card(bid).minimum.cents === 0 ? words('none') : figure(formatCents(card(bid).minimum.cents), `${describeMinimum(card(bid)).replace(/^\S+ minimum /, '')}${added > 0 ? `; adds ${formatCents(added)}` : ''}`);
}

function fit({ frozen: { estimate } }: ComparedBid): Cell {
  return estimate.fit.fits ? words('all of them', estimate.fit.notes.join(' ')) : words('not all', [...estimate.fit.reasons, ...estimate.fit.notes].join(' '));
}

function cutList({ cover, coverIsLate, status }: ComparedBid): Cell {
  if (!cover && status === 'toConfirm') return words('not yet', 'once the sawyer has confirmed');
  if (!cover) return coverIsLate ? words('not worked out yet', 'tried again each hour; see it now under “Boards in these logs”') : words('being worked out', 'look again in a minute');
  const { made, text, note } = coverWords(cover);
  return { ...(made ? words(text, note) : figure(text, note)), ...(made ? { mark: 'whole list' } : {}) };
}

/** What a comparison's listing asks for beside its logs. */
export interface Wants {
  readonly list: boolean;
  readonly dwelling: boolean;
}

/** Every row of the comparison, a cell for each bid in the order given. Rows that would be empty for all are left out. */
export function comparedRows(bids: readonly ComparedBid[], wants: Wants): readonly ComparedRow[] {
  const row = (label: string, cell: (bid: ComparedBid) => Cell, more: Omit<ComparedRow, 'label' | 'cells'> = {}): ComparedRow => ({ label, ...more, cells: bids.map(cell) });
  const lowest = marking(bids, ({ expectedCents }) => expectedCents, 'lowest');
  const lowestPerBf = marking(bids, ({ frozen }) => frozen.estimate.quote.costPerBfCents, 'lowest');
  const earliest = marking(bids, ({ earliestOpenDay }) => earliestOpenDay, 'earliest');
  const nearest = marking(bids, ({ roadMiles }) => roadMiles, 'nearest');
  return [
    row('Rate', (bid) => figure(describeRate(card(bid), bid.frozen.terms.offBearer), describeBasis(card(bid)))),
    row('Off-bearer', (bid) => words(bid.frozen.terms.offBearer === 'landowner-provides' ? 'you provide one' : 'the sawyer brings one')),
    row('Sawing your logs', (bid) => figure(formatCents(parts(bid).sawing), linesOf(bid, 'sawing').map(lineWords).join('; '))),
    ...(bids.some((bid) => linesOf(bid, 'surcharge', 'extra').length > 0) ? [row('Surcharges and extras', surcharges)] : []),
    row('Set-up and travel', setUpAndTravel),
    row('Minimum', minimum),
    row('Metal hit, per blade', (bid) => figure(`${formatDollars(card(bid).metal.resharpenedCents)} / ${formatDollars(card(bid).metal.destroyedCents)}`, `re-sharpened / destroyed; at most ${formatCents(bid.frozen.terms.metalCapCents)} in all`)),
    ...(bids.some((bid) => card(bid).tax !== null) ? [row('Tax', (bid) => (card(bid).tax === null ? words('none stated') : figure(formatCents(parts(bid).tax), `${card(bid).tax?.label ?? ''} ${card(bid).tax?.pct ?? 0} %, as the sawyer states it`)))] : []),
    row('Estimate', (bid) => lowest(bid, figure(formatCents(bid.expectedCents), bid.lowCents === bid.highCents ? 'the same over the range' : `${formatCents(bid.lowCents)} – ${formatCents(bid.highCents)}`)), { strong: true, note: 'range from measuring error' }),
    row('Hold', (bid) => figure(formatCents(bid.holdCents)), { note: 'held until you sign the tally; what is not used goes back' }),
    ...(bids.some((bid) => best(bid) !== undefined) ? [row('Best possible lumber', (bid) => (best(bid) === undefined ? words('no plan') : figure(`${bf(best(bid) ?? 0)} bf`)), { note: 'by the sawing plan of these logs on that mill, for most lumber in the sizes of your list' })] : []),
    row('Expected lumber tally', (bid) => figure(`${bf(bid.expectedBf)} bf`, [bid.expectedBy, bid.overrideReason === null ? '' : `“${bid.overrideReason}”`].filter(Boolean).join(': '))),
    row('Cost per bf sawn', (bid) => lowestPerBf(bid, figure(bid.frozen.estimate.quote.costPerBfCents === null ? '–' : formatCents(bid.frozen.estimate.quote.costPerBfCents))), { strong: true }),
    ...(wants.list ? [row('Your cut list', cutList, { note: 'as planned on that mill' })] : []),
    ...(wants.dwelling ? [row('Lumber for a dwelling', ({ lumberCredential, lumberCertificate }) => (lumberCredential === '' ? words(lumberCertificate ?? 'none stated') : words(lumberCredential, lumberCertificate ?? 'as the sawyer states it')), { note: 'local code asks for a grade or certification' })] : []),
    row('Mill', (bid) => words(bid.mill.name, millWords(bid.mill))),
    row('Logs that fit it', fit),
    row('Slabs and sawdust', (bid) => words({ left: 'stay at the landing', hauled: 'hauled away', bundled: 'bundled and left' }[bid.frozen.terms.waste])),
    row('Earliest open day', (bid) => earliest(bid, figure(bid.earliestOpenDay === null ? 'none in 60 days' : formatDay(bid.earliestOpenDay), bid.daysOffered.length === 0 ? undefined : `offers ${bid.daysOffered.map(formatDay).join(', ')}`))),
    row('Road miles, one way', (bid) => nearest(bid, figure(String(bid.roadMiles)))),
    row('Reviews', (bid) => (bid.stars === null ? words('none yet') : figure(`${bid.stars.toFixed(1)} of 5`, bid.reviews === 1 ? 'one review' : `${bid.reviews} reviews`))),
    row('Insurance', (bid) => words(bid.certificate ?? 'no certificate seen')),
    ...(bids.some(({ message }) => message !== '') ? [row('Message', ({ message }) => words(message === '' ? '–' : message))] : []),
  ];
}
