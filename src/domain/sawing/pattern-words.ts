import type { PlannedLog } from './listing-plan.ts';
import { type PieceKind, pieceKindWords } from './piece-kind.ts';
import { type Pattern, PATTERNS } from './saw-plan.ts';

/** How boards may be sawn, as a page offers it. Timbers and slabs have ways of their own. */
export const patternChoices: readonly { readonly value: Pattern | 'best'; readonly label: string }[] = [
  { value: 'best', label: 'as each log gives most' },
  { value: 'live', label: 'through and through' },
  { value: 'cant', label: 'round a cant' },
  { value: 'quartersawn', label: 'quartersawn' },
];

/** The pattern of an address; left to the planner when it is none. */
export const patternOf = (text: string | null): Pattern | 'best' => PATTERNS.find((pattern) => pattern === text) ?? 'best';

/** What a log of the cut list is used for: its boards, or the timbers or slabs that it was given over to. */
export function usedFor({ plan }: PlannedLog, pieces: readonly { readonly kind: PieceKind }[]): string {
  const kinds = [...new Set(plan.boards.flatMap(({ piece }) => pieces[piece]?.kind ?? []))];
  const special = kinds.filter((kind) => kind !== 'board').map((kind) => pieceKindWords[kind]);
  return special.length > 0 ? `for the cut list: ${special.join(', ')}` : 'for the cut list';
}
