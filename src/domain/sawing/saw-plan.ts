import { type Board, totalBoardFeet, totalValue } from './board.ts';
import { cantPlan, THOROUGH } from './cant.ts';
import type { LogShape } from './log-shape.ts';
import { flatStack, livePlan } from './live.ts';
import { type Mill, type Piece, type Stock, stockOf } from './pieces.ts';
import { quartersawnPlan } from './quartersawn.ts';

export type Pattern = 'live' | 'cant' | 'quartersawn';

export interface Found {
  readonly pattern: Pattern;
  readonly boards: readonly Board[];
  readonly bound: number;
}

export function planPatterns(stock: Stock, patterns: readonly Pattern[], effort = THOROUGH): Found[] {
  const flats = flatStack(stock);
  const live = flats.above(-stock.reach);
  const found: Found[] = [];
  for (const pattern of patterns) {
    if (pattern === 'live') found.push({ pattern, boards: livePlan(stock, flats), bound: live });
    if (pattern === 'quartersawn') found.push({ pattern, ...quartersawnPlan(stock) });
    if (pattern === 'cant') {
      const cant = cantPlan(stock, flats, live, effort);
      found.push({ pattern, boards: cant.boards.length > 0 ? cant.boards : livePlan(stock, flats), bound: cant.bound });
    }
  }
  return found;
}
