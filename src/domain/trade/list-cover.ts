import { pieceSize } from '../listing/piece-words.ts';
import type { PieceRead } from '../listing/rows.ts';
import { pieceKindWords } from '../sawing/piece-kind.ts';
import type { CutListAnswer } from '../sawing/cut-list.ts';

/** Raised when plans are made otherwise than before: covers of an older version are worked out anew. */
export const LIST_PLAN_VERSION = 2;

/** What one mill makes of a listing's cut list, as a bid keeps it. */
export interface ListCover {
  /** `LIST_PLAN_VERSION` when it was planned; none in the first. */
  readonly version?: number | undefined;
  /** The listing's revision and the mill that were planned. */
  readonly revision: number;
  readonly millId: string;
  readonly pieces: readonly CoveredPiece[];
  readonly boardFeetShort: number;
  /** No other plan of these logs on that mill leaves less short. */
  readonly provenBest: boolean;
}

export interface CoveredPiece {
  readonly label: string;
  /** `2 × 6 in × 8 ft` */
  readonly size: string;
  readonly count: number;
  readonly short: number;
}

/** The cover of a cut list out of its plan; `pieces` as they were planned, by id. */
export function listCover(list: Omit<CutListAnswer, 'plans'>, pieces: readonly (PieceRead & { readonly id: string })[], planned: Pick<ListCover, 'revision' | 'millId'>): ListCover {
  const short = new Map(list.covered.map((each) => [each.id, each.short]));
  return {
    version: LIST_PLAN_VERSION,
    ...planned,
    pieces: pieces.map((piece) => ({ label: piece.label, size: [pieceSize(piece), pieceKindWords[piece.kind]].filter(Boolean).join(', '), count: piece.count, short: short.get(piece.id) ?? piece.count })),
    boardFeetShort: list.boardFeetShort,
    provenBest: list.provenBest,
  };
}

const NAMED = 3;

/** Made or short in a few words, and which pieces are short: `short of 3 of 12 rafters (2 × 6 in × 8 ft)`. */
export function coverWords({ pieces, boardFeetShort }: ListCover): { readonly made: boolean; readonly text: string; readonly note: string } {
  const short = pieces.filter((piece) => piece.short > 0);
  if (short.length === 0) return { made: true, text: 'made', note: pieces.length === 1 ? 'the one size of your list' : `all ${pieces.length} sizes` };
  const named = short.slice(0, NAMED).map((piece) => `${piece.short} of ${piece.count} ${piece.label === '' ? piece.size : `${piece.label} (${piece.size})`}`);
  const more = short.length - named.length;
  return { made: false, text: `short, ${Math.max(1, Math.round(boardFeetShort)).toLocaleString('en-US')} bf`, note: `${named.join('; ')}${more > 0 ? `; and ${more} more` : ''}` };
}

/** Which of several bids make the list, for the words over a comparison; empty where nothing is wanted, nothing known yet, or one bid alone. */
export function listInWords(bids: readonly { readonly sawyer: string; readonly cover: ListCover | null }[]): readonly string[] {
  const known = bids.flatMap(({ sawyer, cover }) => (cover ? [{ sawyer, short: cover.boardFeetShort }] : []));
  if (bids.length < 2 || known.length < bids.length) return [];
  const makers = known.filter(({ short }) => short === 0).map(({ sawyer }) => sawyer);
  if (makers.length === known.length) return ['Every mill makes your cut list as planned.'];
  if (makers.length > 0) return [`Your cut list is made by ${makers.length === 1 ? `${makers[0]} only` : `${makers.slice(0, -1).join(', ')} and ${makers.at(-1)}`}; on the other ${known.length - makers.length === 1 ? 'mill' : 'mills'} it comes out short.`];
  const least = known.reduce((a, b) => (b.short < a.short ? b : a));
  return [`No mill makes the whole of your cut list from these logs; ${least.sawyer} leaves least short, ${Math.round(least.short).toLocaleString('en-US')} bf.`];
}
