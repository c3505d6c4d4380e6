/** How a piece must lie in its log: a board anywhere, a timber round the heart or clear of it, or a slab with both edges left on. */
export type PieceKind = 'board' | 'boxed-heart' | 'free-of-heart' | 'slab';

export const PIECE_KINDS: readonly PieceKind[] = ['board', 'boxed-heart', 'free-of-heart', 'slab'];

/** In the trade's words, for tables; a board needs none. */
export const pieceKindWords: Readonly<Record<PieceKind, string>> = {
  board: '',
  'boxed-heart': 'timber, heart boxed',
  'free-of-heart': 'timber, FOHC',
  slab: 'live-edge slab',
};
