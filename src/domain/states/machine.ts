/**
 * A state table: the states a thing may be in and the named moves between them. Tables only; `server/transition.ts` is the
 * one place that writes a status, and the database carries the same list of states as a CHECK.
 */
export interface Machine<State extends string, Move extends string> {
  /** The thing's name, also its table's name. */
  readonly thing: string;
  readonly states: readonly State[];
  readonly moves: Readonly<Record<Move, { readonly from: readonly State[]; readonly to: State }>>;
}

/** Keeps the literal types of a table while checking that every move runs between its own states. */
export const machine = <const State extends string, const Move extends string>(table: Machine<State, Move>): Machine<State, Move> => table;

/** Whether the move may be made from the state. */
export const allows = <State extends string, Move extends string>(table: Machine<State, Move>, move: Move, from: State): boolean =>
  table.moves[move].from.includes(from);
