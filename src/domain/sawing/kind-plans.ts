import { bandWorks, layersValue } from './band.ts';
import { type Board, section } from './board.ts';
import { boxedHeart, FOHC_CLEAR_IN } from './heart-timber.ts';
import { acrossLog, mirrored } from './layers.ts';
import { boardsOfLayers, flatStack } from './live.ts';
import type { LogShape } from './log-shape.ts';
import type { PieceKind } from './piece-kind.ts';
import { blockedHalfWidth, type Mill, type Piece, roomierStock, type Stock, stockOf } from './pieces.ts';
import { type Pattern, sawPlan } from './saw-plan.ts';
import { hindrance, slabsIn } from './special-pieces.ts';
import { unitsUp } from './units.ts';

/** A size of a cut list with its price per board foot. */
export interface PricedSize extends Piece {
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly value: number;
  readonly kind: PieceKind;
}

export interface KindRequest {
  readonly log: LogShape;
  readonly mill: Mill;
  readonly pattern: Pattern | 'best';
  /** Sizes of no value are not cut. */
  readonly sizes: readonly PricedSize[];
  readonly waneAllowanceIn?: number | undefined;
  readonly effort: number;
}

export interface KindPlan {
  readonly pattern: Pattern;
  /** Each names its size by index. */
  readonly boards: readonly Board[];
}

export interface KindPlans {
  readonly plans: readonly KindPlan[];
  /** No plan of one log in these ways is worth more. */
  readonly bound: number;
}

const NOTHING = 1e-9;
const price = ({ value, thicknessIn, widthIn, lengthFt }: PricedSize): number => (value * thicknessIn * widthIn * lengthFt) / 12;

/** How near a board comes to the pith, in. */
function fromPith(board: Board): number {
  const { left, right, bottom, top } = section(board);
  return Math.hypot(Math.max(0, left, -right), Math.max(0, bottom, -top));
}

/** Sizes with those of other kinds left out: the planner passes over a count of 0. */
const only = (sizes: readonly PricedSize[], ...kinds: readonly PieceKind[]): Piece[] => sizes.map(({ kind, ...size }) => (kinds.includes(kind) && size.value > NOTHING ? size : { ...size, count: 0 }));

/**
 * What one log may be cut to at some prices, one plan of each way that the sizes ask for: boards and timbers free of heart centre in
 * the pattern, one timber round the heart with boards on all sides, or slabs from the middle out with boards above and below. In a
 * quartersawn list timbers and slabs have a log for themselves.
 */
export function kindPlans(request: KindRequest): KindPlans {
  const { pattern, sizes } = request;
  const wanted = sizes.filter(({ value }) => value > NOTHING);
  const has = (kind: PieceKind): boolean => wanted.some((size) => size.kind === kind);
  if (wanted.length === 0) return { plans: [], bound: 0 };
  const quartered = pattern === 'quartersawn';
  const beside: readonly PieceKind[] = quartered ? [] : ['board', 'free-of-heart'];
  const found: KindPlans[] = [];
  // Slabs are no wider than boards across a layer of their own, so the bound of boards in their place covers them.
  const inPattern = only(sizes, 'board', ...(quartered ? [] : (['free-of-heart', 'slab'] as const)));
  const heartFree = has('free-of-heart') ? clearOfHeart(request, only(sizes, 'free-of-heart', ...beside), quartered ? 'cant' : pattern) : null;
  // Timbers free of heart alone are bounded by their own plan, whatever lies at the heart.
  const alone = inPattern.every((piece, index) => piece.count === 0 || sizes[index]?.kind === 'free-of-heart');
  if (!alone) found.push(boardPlans(request, inPattern, pattern));
  if (heartFree) found.push(alone || quartered ? heartFree : { ...heartFree, bound: 0 });
  sizes.forEach((size, index) => {
    if (size.value <= NOTHING) return;
    if (size.kind === 'boxed-heart') found.push(boxed(request, index, only(sizes, ...beside)));
    if (size.kind === 'slab') found.push(slabbed(request, index, only(sizes, ...beside), quartered));
  });
  return { plans: found.flatMap(({ plans }) => plans).filter(({ boards }) => boards.length > 0), bound: found.reduce((most, { bound }) => Math.max(most, bound), 0) };
}

/** A saw plan of the sizes that may be cut, whose boards name them by their place among all. */
function planned({ log, mill, waneAllowanceIn, effort }: KindRequest, pieces: readonly Piece[], pattern: Pattern | 'best'): KindPlan & { readonly bound: number } {
  const places = pieces.flatMap((piece, index) => (piece.count === 0 ? [] : [index]));
  const plan = sawPlan({ log, mill, pattern, pieces: places.flatMap((place) => pieces[place] ?? []), waneAllowanceIn, effort });
  return { pattern: plan.pattern, boards: plan.boards.map((board) => ({ ...board, piece: places[board.piece] ?? 0 })), bound: plan.upperBoundValue };
}

/** A plan of the pattern; what of it is no sound timber or slab is left out of the boards, not out of the bound. */
function boardPlans(request: KindRequest, pieces: readonly Piece[], pattern: Pattern | 'best'): KindPlans {
  const { bound, boards, ...plan } = planned(request, pieces, pattern);
  const kindOf = ({ piece }: Board): PieceKind => request.sizes[piece]?.kind ?? 'board';
  const sound = boards.filter((board) => kindOf(board) === 'board' || (kindOf(board) === 'free-of-heart' && fromPith(board) >= FOHC_CLEAR_IN - 1e-9));
  const boardsAlone = pieces.map((piece, index) => (request.sizes[index]?.kind === 'board' ? piece : { ...piece, count: 0 }));
  const alone = sound.length < boards.length && boardsAlone.some((piece) => piece.count !== 0) ? [planned(request, boardsAlone, pattern)] : [];
  return { plans: [{ ...plan, boards: sound }, ...alone], bound };
}

/** Nothing within an inch of the pith. */
function clearOfHeart(request: KindRequest, pieces: readonly Piece[], pattern: Pattern | 'best'): KindPlans {
  const { log } = request;
  const { bound, ...plan } = planned({ ...request, log: { ...log, heartDefectIn: Math.max(log.heartDefectIn ?? 0, 2 * FOHC_CLEAR_IN) } }, pieces, pattern);
  return { plans: [plan], bound };
}

/** One timber round the heart, lying or standing, and the best boards on its four sides. */
function boxed({ log, mill, sizes, waneAllowanceIn }: KindRequest, index: number, beside: readonly Piece[]): KindPlans {
  const size = sizes[index] as PricedSize;
  const { thicknessIn, widthIn, lengthFt, value } = size;
  if (log.heartDefectIn || hindrance(log, mill, size) !== null) return { plans: [], bound: 0 };
  // What lies round a thin timber may be nearer the pith than a timber free of heart centre may.
  const clear = Math.min(thicknessIn, widthIn) / 2 + mill.kerfIn >= FOHC_CLEAR_IN;
  const pieces = beside.map((piece, place) => (clear || sizes[place]?.kind === 'board' ? piece : { ...piece, count: 0 }));
  const ways = [{ high: thicknessIn, wide: widthIn, turned: false }, ...(thicknessIn === widthIn ? [] : [{ high: widthIn, wide: thicknessIn, turned: true }])];
  const plans = ways.flatMap(({ high, wide, turned }) => {
    const { boards } = boxedHeart({ log, mill, timber: { thicknessIn: high, widthIn: wide, lengthFt, value }, pieces, waneAllowanceIn });
    if (boards.length === 0) return [];
    const named = boards.map((board): Board => (board.piece === pieces.length ? { ...board, thicknessIn, widthIn, turned, piece: index } : board));
    return [{ pattern: 'cant' as const, boards: named, bound: price(size) + roundTimber(stockOf(log, mill, pieces, waneAllowanceIn), high, wide) }];
  });
  return { plans, bound: plans.reduce((most, { bound }) => Math.max(most, bound), 0) };
}

/** The most that boards round a timber are worth: exact of one length, else as if every board had its longest worth and the shortest room. */
function roundTimber(stock: Stock, highIn: number, wideIn: number): number {
  const roomy = stock.oneLength ? stock : roomierStock(stock);
  const half = Math.ceil(unitsUp(highIn) / 2);
  const side = bandWorks(roomy).columnsFrom({ below: half, above: half }, Math.ceil(unitsUp(wideIn) / 2) + roomy.kerf);
  return 2 * flatStack(roomy).above(half + roomy.kerf) + 2 * layersValue(acrossLog(roomy, -half, half), side);
}

/** Slabs of one size from the middle out: as many as are worth most with the boards above and below them, and as many as there are. */
function slabbed({ log, mill, sizes, waneAllowanceIn }: KindRequest, index: number, beside: readonly Piece[], alone: boolean): KindPlans {
  const size = sizes[index] as PricedSize;
  const slabs = slabsIn(log, mill, size).map((board) => ({ ...board, piece: index }));
  if (slabs.length === 0) return { plans: [], bound: 0 };
  const stock = stockOf(log, mill, beside, waneAllowanceIn);
  const flats = flatStack(stock);
  const flat = acrossLog(stock);
  const free = Math.ceil(Math.max(stock.heart, blockedHalfWidth(stock)));
  const edges = (count: number): readonly [number, number] => {
    const taken = slabs.slice(0, count).map(section);
    return [unitsUp(Math.max(...taken.map(({ top }) => top), free > 0 ? 0 : -Infinity)), unitsUp(Math.max(...taken.map(({ bottom }) => -bottom), free > 0 ? 0 : -Infinity))];
  };
  const worth = (count: number): number => edges(count).reduce((sum, edge) => sum + flats.above(edge + stock.kerf), count * price(size));
  let best = slabs.length;
  for (let count = slabs.length - 1; count >= 1; count--) if (worth(count) > worth(best) + 1e-9) best = count;
  const plans = [...new Set([best, slabs.length])].map((count): KindPlan => {
    const [top, bottom] = edges(count);
    const boards = [...boardsOfLayers(stock, flat, flats.layers(top + stock.kerf)), ...boardsOfLayers(stock, flat, mirrored(flats.layers(bottom + stock.kerf)))];
    return { pattern: 'live', boards: [...slabs.slice(0, count), ...boards.filter((board) => sizes[board.piece]?.kind === 'board' || fromPith(board) >= FOHC_CLEAR_IN - 1e-9)] };
  });
  // With boards the bound of the pattern covers these; alone, there are no more slabs than these.
  return { plans, bound: alone ? slabs.length * price(size) : 0 };
}
