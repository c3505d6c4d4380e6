import type { Params } from './params.ts';
import type { World } from './world.ts';

/** What an endpoint is called with. `owner` is '' or the connected account of the `Stripe-Account` header. */
export interface Call {
  readonly world: World;
  readonly params: Params;
  readonly ids: readonly string[];
  readonly owner: string;
}

/** One endpoint: `*` in the path stands for an id. It reads every parameter it knows; the rest is refused after it. */
export interface Route {
  readonly method: 'GET' | 'POST' | 'DELETE';
  readonly path: string;
  readonly run: (call: Call) => unknown;
}

/** The id at a place of the path. */
export const idAt = (call: Call, place = 0): string => call.ids[place] ?? '';
