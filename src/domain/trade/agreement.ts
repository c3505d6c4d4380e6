import { type Cents, formatCents } from '~/domain/money.ts';
import { describeBasis, describeMinimum, describeRate, type BidTerms, type Waste } from './rate-card.ts';

/** The wording below. A change of words is a new version; agreements keep the one they were made with. */
export const AGREEMENT_VERSION = '2026-12';

export interface Clause {
  readonly title: string;
  readonly text: string;
}

/** What a work agreement freezes: who, which listing at which revision, and the terms with the figures both saw. */
export interface AgreedTerms {
  readonly listing: { readonly number: number; readonly title: string; readonly revision: number; readonly logCount: number };
  readonly landowner: string;
  readonly sawyer: string;
  readonly mill: string;
  readonly terms: BidTerms;
  readonly figures: {
    readonly lowCents: Cents;
    readonly expectedCents: Cents;
    readonly highCents: Cents;
    readonly holdCents: Cents;
    readonly expectedBf: number;
    readonly expectedBy: string;
  };
  readonly feeBasisPoints: number;
  readonly daysOffered: readonly string[];
  readonly message: string;
}

const WASTE: Readonly<Record<Waste, string>> = {
  left: 'Slabs and sawdust stay at the landing.',
  hauled: 'The sawyer hauls slabs and sawdust away, for the price on the rate card.',
  bundled: 'The sawyer bundles the slabs and leaves them at the landing, for the price on the rate card.',
};

export const wasteWords = (waste: Waste): string => WASTE[waste];

/** The agreement's clauses in plain words, from the frozen terms. Not legal advice, and says so. */
export function agreementClauses({ terms, figures, feeBasisPoints }: AgreedTerms): readonly Clause[] {
  const { card, offBearer, metalCapCents } = terms;
  const { metal, travel, tax, cullOpening, extras } = card;
  const opening = cullOpening === null ? 'Opening it is not charged' : `Opening it costs ${formatCents(cullOpening.cents)} ${cullOpening.kind === 'hour' ? 'an hour, to a quarter hour' : 'a pass of the saw'}`;
  return [
    {
      title: 'What is charged',
      text: `${describeRate(card, offBearer)}: ${describeBasis(card)}. ${offBearer === 'landowner-provides' ? 'The landowner provides an adult off-bearer.' : 'The sawyer brings an off-bearer.'} The rate card below is part of this agreement; there is ${describeMinimum(card)}.`,
    },
    {
      title: 'The estimate and the hold',
      text: `The estimate is ${formatCents(figures.expectedCents)}, from ${formatCents(figures.lowCents)} to ${formatCents(figures.highCents)} for the error in measuring. ${formatCents(figures.holdCents)} is held until the landowner signs the tally: the high end with the whole metal cap${tax === null ? '' : ' and tax'}. The landowner pays for the tally, never for the estimate; the rest goes back to the card.`,
    },
    {
      title: 'No promise of yield or straightness',
      text: `${Math.round(figures.expectedBf).toLocaleString('en-US')} bf is what is expected (${figures.expectedBy}). Nobody can see inside a log: how many boards it gives, their grade, and whether they stay straight as they dry is not promised by either side.`,
    },
    {
      title: 'Metal',
      text: `Metal in a log is the landowner’s: ${formatCents(metal.resharpenedCents)} for a blade re-sharpened, ${formatCents(metal.destroyedCents)} for one destroyed, up to ${formatCents(metalCapCents)} in all. After two hits sawing stops until the landowner allows more. Dulling and dirt are the sawyer’s, unless the logs were dragged.`,
    },
    {
      title: 'The right to refuse a log',
      text: `The sawyer may refuse a log that is unsafe, over the mill’s limits, or likely to hold metal. A rotten log is left: ${opening}, and the rest of it leaves the estimate. A log that scales over 15 % more than listed is shown to both, who agree before it is sawn. Logs added on the day are a new line, accepted by both before sawing.`,
    },
    {
      title: 'Waiting, rain and coming again',
      text: `Waiting for the landowner or for logs to be re-decked costs ${card.basis.kind === 'hourly' ? 'the hourly rate' : `${formatCents(extras.waitingPerHour)} an hour, to a quarter hour`}. Rain postpones by agreement without a new payment, and a partial tally stands. Travel is ${travel.owedAgainAfterRain ? '' : 'not '}owed again for coming back; a set-up again only when both agree. If the sawyer leaves early or breaks down, the tally and one journey are paid.`,
    },
    { title: 'Waste', text: `${WASTE[terms.waste]} What is done against this is not charged. Walnut shavings and sawdust must not reach horses.` },
    {
      title: 'Damage and care',
      text: 'Each side answers for the damage it causes. The landowner says what lies under and over the landing (septic, wells, lines) and keeps people and animals clear; nobody under 18 helps at the mill. Follow local codes, the mill’s manual and a licensed or trained professional where the work needs one.',
    },
    ...(terms.shared
      ? [{ title: 'A shared trip', text: `This job is part of shared trip ${terms.shared.trip}: travel is ${formatCents(terms.shared.travelCents)} and set-up ${formatCents(terms.shared.setUpCents)}, in the place of the rate card’s. These amounts stand whatever the others on the trip do.` }]
      : []),
    {
      title: 'Cancelling',
      text: 'Free for both until 48 hours before the first day starts. Later, the landowner owes set-up and travel; when the sawyer cancels, everything goes back.',
    },
    {
      title: 'The tally, and being paid',
      text: `The tally counts the boards as this agreement says; boards out of size are recorded and cost nothing. The landowner signs it or queries lines. Unanswered for 72 hours it counts as signed, up to the hold. The sawyer receives the amount less Skidway’s fee of ${feeBasisPoints / 100} % (taken on the amount without tax), released the same day; banks take some days.`,
    },
    { title: 'What this is', text: 'This page records what two people agreed. It is not legal advice. Where local law says otherwise, the law stands.' },
  ];
}

/** Text of a JSON value with its keys in order, so that equal content has equal text wherever it was stored. */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map((one) => canonicalJson(one ?? null)).join(',')}]`;
  if (value === null || typeof value !== 'object') return JSON.stringify(value ?? null);
  const entries = Object.entries(value).filter(([, inner]) => inner !== undefined).sort(([a], [b]) => (a < b ? -1 : 1));
  return `{${entries.map(([key, inner]) => `${JSON.stringify(key)}:${canonicalJson(inner)}`).join(',')}}`;
}
