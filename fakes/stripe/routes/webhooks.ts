import type Stripe from 'stripe';
import { invalid, missing } from '../errors.ts';
import { find, page } from '../reading.ts';
import { idAt, type Route } from '../route.ts';
import { API_VERSION, type World } from '../world.ts';

/** Whose events an endpoint hears: the platform's own, its connected accounts', or both at one address. */
export type Scope = 'platform' | 'connect' | 'both';

/** Registers an address for events; the secret is shown this once. */
export function addEndpoint(world: World, url: string, events: readonly string[], secret: string, scope: Scope, id = world.id('we')): Stripe.WebhookEndpoint {
  const made = {
    id,
    object: 'webhook_endpoint',
    api_version: API_VERSION,
    application: null,
    created: world.now(),
    description: null,
    enabled_events: [...events],
    livemode: false,
    metadata: {},
    status: 'enabled',
    url,
  } satisfies Stripe.WebhookEndpoint;
  world.store.put('webhook_endpoint', id, made);
  world.setNote(`secret of ${id}`, secret);
  world.setNote(`scope of ${id}`, scope);
  return { ...made, secret };
}

export const WEBHOOK_ROUTES: readonly Route[] = [
  {
    method: 'POST',
    path: '/v1/webhook_endpoints',
    run: ({ world, params }) => {
      const url = params.need('url');
      if (!/^https?:\/\/[^\s]+$/.test(url)) throw invalid('Invalid URL: must be absolute', 'url_invalid', 'url');
      const events = params.texts('enabled_events');
      if (events.length === 0) throw missing('enabled_events');
      const scope = params.flag('connect') === true ? 'connect' : 'platform';
      params.text('description');
      params.text('api_version');
      return addEndpoint(world, url, events, world.id('whsec'), scope);
    },
  },
  { method: 'GET', path: '/v1/webhook_endpoints', run: ({ world, params }) => page(world, world.store.all('webhook_endpoint'), '/v1/webhook_endpoints', params) },
  { method: 'GET', path: '/v1/webhook_endpoints/*', run: (call) => find(call.world, 'webhook_endpoint', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/webhook_endpoints/*',
    run: (call) => {
      const before = find(call.world, 'webhook_endpoint', idAt(call));
      const events = call.params.texts('enabled_events');
      const disabled = call.params.flag('disabled');
      const after: Stripe.WebhookEndpoint = {
        ...before,
        url: call.params.text('url') ?? before.url,
        enabled_events: events.length === 0 ? before.enabled_events : events,
        status: disabled === undefined ? before.status : disabled ? 'disabled' : 'enabled',
      };
      call.world.store.put('webhook_endpoint', after.id, after);
      return after;
    },
  },
  {
    method: 'DELETE',
    path: '/v1/webhook_endpoints/*',
    run: (call) => {
      const endpoint = find(call.world, 'webhook_endpoint', idAt(call));
      call.world.store.put('webhook_endpoint', endpoint.id, null);
      return { id: endpoint.id, object: 'webhook_endpoint', deleted: true };
    },
  },
  {
    method: 'GET',
    path: '/v1/events',
    run: ({ world, params, owner }) => {
      const type = params.text('type');
      const types = params.texts('types');
      const succeeded = params.flag('delivery_success');
      const undelivered = succeeded === undefined ? null : new Set(world.store.all('delivery').filter((each) => each.state !== 'done').map((each) => each.event));
      const wanted = world.store
        .all('event', owner)
        .filter((each) => (type === undefined || each.type === type) && (types.length === 0 || types.includes(each.type)) && (undelivered === null || undelivered.has(each.id) !== succeeded));
      return page(world, wanted, '/v1/events', params);
    },
  },
  { method: 'GET', path: '/v1/events/*', run: (call) => find(call.world, 'event', idAt(call), call.owner) },
];
