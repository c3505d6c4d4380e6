import { z } from 'zod';
import { list } from './fields.ts';

/** How a sawyer's desk groups bids, in the order of its tabs. */
export const deskGroups = ['live', 'toConfirm', 'chosen', 'lost', 'withdrawn', 'all'] as const;
export type DeskGroup = (typeof deskGroups)[number];

export const deskSorts = ['updated', 'closing', 'estimate', 'miles'] as const;
export type DeskSort = (typeof deskSorts)[number];

export interface DeskAsked {
  readonly show: DeskGroup;
  readonly sort: DeskSort;
  /** Part of a listing's title or town, or its number. */
  readonly words: string;
}

const asked = z.object({
  show: z.enum(deskGroups).catch('live'),
  sort: z.enum(deskSorts).catch('updated'),
  words: z.string().trim().max(100).catch(''),
});

/** Reads the desk's address; what is not understood counts as left out. */
export const readBidsDesk = (params: URLSearchParams): DeskAsked => asked.parse({ show: params.get('show') ?? 'live', sort: params.get('sort') ?? 'updated', words: params.get('words') ?? '' });

/** At most this many bids are withdrawn at once. */
export const MOST_WITHDRAWN = 100;

/** Ticked bids, and whether the sawyer has seen what is about to be withdrawn. */
export const withdrawBidsForm = z.object({
  bids: list.transform((ids) => [...new Set(ids)]).pipe(z.array(z.string().max(36)).min(1, 'Tick the bids to withdraw.').max(MOST_WITHDRAWN, `At most ${MOST_WITHDRAWN} at once.`)),
  sure: z.enum(['yes', 'no']).catch('no'),
});
export type WithdrawBidsForm = z.output<typeof withdrawBidsForm>;
