import type Stripe from 'stripe';
import { asOfNow } from './balance.ts';
import { linesOf } from './checkout.ts';
import { invalid, noSuch } from './errors.ts';
import type { Params } from './params.ts';
import type { Kind, Kinds } from './store.ts';
import type { World } from './world.ts';

type Json = { [name: string]: unknown };

/** The words for a kind in "No such …". */
const WORDS: Partial<Record<Kind, string>> = { balance_transaction: 'balance transaction', payment_intent: 'payment_intent', session: 'checkout.session', webhook_endpoint: 'webhook endpoint', transfer_reversal: 'transfer reversal' };

/** Which kind an id belongs to, told by its first letters. */
const PREFIXES: readonly [string, Kind][] = [
  ['acct_', 'account'], ['ch_', 'charge'], ['cs_', 'session'], ['du_', 'dispute'], ['evt_', 'event'], ['pi_', 'payment_intent'],
  ['po_', 'payout'], ['py_', 'charge'], ['re_', 'refund'], ['trr_', 'transfer_reversal'], ['tr_', 'transfer'], ['txn_', 'balance_transaction'],
];

/** An object that belongs to the owner. @throws the provider's 404 `resource_missing`. */
export function find<K extends Kind>(world: World, kind: K, id: string, owner = '', param = 'id', status: 400 | 404 = 404): Kinds[K] {
  const found = world.store.get(kind, id);
  if (found === undefined || world.store.ownerOf(kind, id) !== owner) throw noSuch(WORDS[kind] ?? kind, id, param, status);
  return found;
}

/** The object as it is shown now: fields that depend on the clock or on deliveries are worked out. */
export function present(world: World, object: unknown): unknown {
  if (typeof object !== 'object' || object === null || !('object' in object)) return object;
  if (object.object === 'balance_transaction') return asOfNow(world, object as Stripe.BalanceTransaction);
  if (object.object === 'event') {
    const event = object as Stripe.Event;
    const waiting = world.store.all('delivery').filter((delivery) => delivery.event === event.id && delivery.state === 'waiting').length;
    return { ...event, pending_webhooks: waiting };
  }
  return object;
}

/** Fields that appear only when asked for with `expand`. */
function includable(world: World, object: Json, field: string): unknown {
  const id = String(object['id'] ?? '');
  if (object['object'] === 'checkout.session' && field === 'line_items') return linesOf(world, id);
  if (object['object'] === 'charge' && field === 'refunds') {
    const data = world.store.all('refund').filter((refund) => refund.charge === id).reverse();
    return { object: 'list', data, has_more: false, url: `/v1/charges/${id}/refunds` };
  }
  return undefined;
}

/** Replaces ids by objects along one path such as `data.latest_charge.balance_transaction`. */
function expandPath(world: World, node: unknown, path: readonly string[], whole: string): unknown {
  const [field, ...rest] = path;
  if (field === undefined || node === null || node === undefined) return node;
  if (Array.isArray(node)) return node.map((each) => expandPath(world, each, path, whole));
  if (typeof node !== 'object') throw invalid(`This property cannot be expanded (${whole}).`);
  const object = node as Json;
  const value = includable(world, object, field) ?? object[field];
  if (value === undefined) throw invalid(`This property cannot be expanded (${whole}).`);
  let opened = value;
  if (typeof value === 'string') {
    const kind = PREFIXES.find(([prefix]) => value.startsWith(prefix))?.[1];
    if (kind === undefined) throw invalid(`This property cannot be expanded (${whole}).`);
    opened = present(world, world.store.get(kind, value) ?? value) as typeof opened;
  }
  return { ...object, [field]: expandPath(world, opened, rest, whole) };
}

/** The answer with every `expand[]` path opened; at most four levels, as the provider allows. */
export function expand(world: World, answer: unknown, paths: readonly string[]): unknown {
  let opened = answer;
  for (const path of paths) {
    const names = path.split('.');
    if (names.filter((name) => name !== 'data').length > 4) throw invalid('You cannot expand more than 4 levels of a property.');
    opened = expandPath(world, opened, names, path);
  }
  return opened;
}

/** Whether an instant lies in `created` given as a number or as gt/gte/lt/lte. */
function createdFilter(params: Params): (created: number) => boolean {
  const raw = params.anything('created');
  if (raw === undefined) return () => true;
  if (typeof raw === 'string') return (created) => created === Number(raw);
  if (Array.isArray(raw)) throw invalid('Invalid timestamp', undefined, 'created');
  const bound = (name: string, none: number): number => {
    const value = raw[name];
    if (value === undefined) return none;
    if (typeof value !== 'string' || !/^\d+$/.test(value)) throw invalid(`Invalid timestamp: ${JSON.stringify(value)}`, undefined, `created[${name}]`);
    return Number(value);
  };
  const [gt, gte, lt, lte] = [bound('gt', -1), bound('gte', 0), bound('lt', Infinity), bound('lte', Infinity)];
  return (created) => created > gt && created >= gte && created < lt && created <= lte;
}

/** One page of a list, newest first, by `limit`, `starting_after` or `ending_before`, and `created`. */
export function page<T extends { id: string; created?: number }>(world: World, oldestFirst: readonly T[], url: string, params: Params): Stripe.ApiList<T> {
  const limit = params.integer('limit') ?? 10;
  if (limit < 1 || limit > 100) throw invalid(`Invalid integer: ${limit}. Must be between 1 and 100`, 'parameter_invalid_integer', 'limit');
  const after = params.text('starting_after');
  const before = params.text('ending_before');
  if (after !== undefined && before !== undefined) throw invalid('You may only specify one of these parameters: ending_before, starting_after.');
  const wanted = createdFilter(params);
  const list = [...oldestFirst].reverse().filter((each) => wanted(each.created ?? 0));
  const at = (id: string, param: string): number => {
    const index = list.findIndex((each) => each.id === id);
    if (index < 0) throw noSuch('object', id, param, 400);
    return index;
  };
  let slice: T[];
  let more: boolean;
  if (before !== undefined) {
    const end = at(before, 'ending_before');
    slice = list.slice(Math.max(0, end - limit), end);
    more = end - limit > 0;
  } else {
    const start = after === undefined ? 0 : at(after, 'starting_after') + 1;
    slice = list.slice(start, start + limit);
    more = start + limit < list.length;
  }
  return { object: 'list', data: slice.map((each) => present(world, each) as T), has_more: more, url };
}

