import { tidy } from './rounding.ts';

/** Boards to stack: one size or several of one length class. */
export interface StackInput {
  readonly boards: readonly { readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number; readonly count: number }[];
  /** Width of the stack, ft. */
  readonly stackWidthFt: number;
  /** Sticker thickness, inches; ¾ is usual. */
  readonly stickerIn: number;
  /** Distance of stickers along the stack, inches. */
  readonly spacingIn: number;
  /** Green or dry weight of the wood, lb per cubic foot. */
  readonly densityLbPerFt3: number;
}

export interface Stack {
  readonly lengthFt: number;
  readonly widthFt: number;
  readonly layers: number;
  readonly stickersPerLayer: number;
  readonly stickers: number;
  /** Height of boards and stickers above the bearers, inches. */
  readonly heightIn: number;
  readonly weightLb: number;
  readonly footprintSqFt: number;
  /** Weight on a square foot of ground or floor, lb. */
  readonly loadLbPerSqFt: number;
}

/** Usual sticker spacing, inches: 12 to 16 for hardwood under 8/4 and for thin lumber, up to 24 for dimension softwood (common practice; Air Drying of Lumber, FPL-GTR-117, from memory). */
export const usualSpacingIn = (group: 'hardwood' | 'softwood', thicknessIn: number): number => (group === 'hardwood' ? (thicknessIn < 2 ? 16 : 24) : thicknessIn < 1 ? 16 : 24);

/** Space left between boards of a layer so that air can rise, inches (common practice, no source). */
export const edgeGapIn = 0.75;

const layersOf = (boards: StackInput['boards'], stackWidthIn: number): { readonly layers: number; readonly heightIn: number } => {
  const byThickness = new Map<number, number>();
  for (const board of boards) byThickness.set(board.thicknessIn, (byThickness.get(board.thicknessIn) ?? 0) + (board.widthIn + edgeGapIn) * board.count);
  let layers = 0;
  let heightIn = 0;
  for (const [thicknessIn, across] of byThickness) {
    const needed = Math.ceil(tidy((across - edgeGapIn) / stackWidthIn));
    layers += needed;
    heightIn += needed * thicknessIn;
  }
  return { layers, heightIn };
};

/**
 * Plans a stickered stack: layers of one thickness each, stickers at both ends and evenly between no further apart than the
 * spacing. Boards are laid one length deep (the longest board sets the length). The number of layers is by area, so uneven
 * widths may need one more.
 */
export function planStack(input: StackInput): Stack {
  const lengthFt = Math.max(0, ...input.boards.map((board) => board.lengthFt));
  const { layers, heightIn } = layersOf(input.boards, input.stackWidthFt * 12);
  const stickersPerLayer = lengthFt === 0 ? 0 : Math.ceil(tidy((lengthFt * 12) / input.spacingIn)) + 1;
  const cubicFeet = input.boards.reduce((sum, board) => sum + (board.thicknessIn * board.widthIn * board.lengthFt * board.count) / 144, 0);
  const weightLb = cubicFeet * input.densityLbPerFt3;
  const footprintSqFt = lengthFt * input.stackWidthFt;
  return {
    lengthFt,
    widthFt: input.stackWidthFt,
    layers,
    stickersPerLayer,
    stickers: stickersPerLayer * (layers + 1),
    heightIn: heightIn + (layers + 1) * input.stickerIn,
    weightLb,
    footprintSqFt,
    loadLbPerSqFt: footprintSqFt === 0 ? 0 : weightLb / footprintSqFt,
  };
}
