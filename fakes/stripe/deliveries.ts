import { createHmac } from 'node:crypto';
import type Stripe from 'stripe';
import { present } from './reading.ts';
import type { KeptDelivery } from './store.ts';
import type { World } from './world.ts';

/** How events are sent; all can be changed while running. */
export interface DeliverySettings {
  /** Every event waits this long before its first attempt. */
  delayMs: number;
  /** Extra copies of each event, sent after the first. */
  duplicates: number;
  /** Each attempt waits a random time up to this, so that events overtake one another. */
  shuffleMs: number;
  /** This many of the next events are lost; they stay in the list of events and can be sent again. */
  dropNext: number;
  /** Nothing is sent while true. */
  paused: boolean;
  /** First wait after a failed attempt; doubled each time, at most an hour. */
  retryBaseMs: number;
}

export const CALM: DeliverySettings = { delayMs: 0, duplicates: 0, shuffleMs: 0, dropNext: 0, paused: false, retryBaseMs: 2_000 };
const MOST_ATTEMPTS = 16;
const TIMEOUT_MS = 20_000;

/** The header the provider sends: `t=` and an HMAC-SHA256 of `t.payload` in hex as `v1=`. */
export function signatureHeader(payload: string, secret: string, seconds = Math.floor(Date.now() / 1000)): string {
  return `t=${seconds},v1=${createHmac('sha256', secret).update(`${seconds}.${payload}`).digest('hex')}`;
}

/** Brings events to their endpoints, again and again until one answers 2xx. Survives a restart: what waits is kept. */
export class Deliveries {
  readonly settings: DeliverySettings;
  private readonly timers = new Map<string, NodeJS.Timeout>();
  private readonly underWay = new Set<Promise<void>>();
  private closed = false;

  constructor(
    private readonly world: World,
    settings: Partial<DeliverySettings>,
  ) {
    this.settings = { ...CALM, ...settings };
    world.onEvent = (event) => this.accept(event);
  }

  /** Takes up the deliveries that were waiting when the stand-in stopped. */
  resume(): void {
    for (const delivery of this.world.store.all('delivery')) if (delivery.state === 'waiting') this.schedule(delivery);
  }

  /** Called inside the change that made the event, so that both are kept or neither. */
  private accept(event: Stripe.Event): void {
    const lost = this.settings.dropNext > 0;
    let wanted = false;
    for (const endpoint of this.world.store.all('webhook_endpoint')) {
      const scope = this.world.store.get('note', `scope of ${endpoint.id}`)?.value;
      const hears = scope === 'both' || (scope === 'connect') === (event.account !== undefined);
      if (endpoint.status !== 'enabled' || !hears || !(endpoint.enabled_events.includes('*') || endpoint.enabled_events.includes(event.type))) continue;
      wanted = true;
      for (let copy = 0; copy <= (lost ? 0 : this.settings.duplicates); copy += 1) this.add(event.id, endpoint.id, lost);
    }
    if (lost && wanted) this.settings.dropNext -= 1;
  }

  private add(event: string, endpoint: string, lost: boolean): void {
    const id = this.world.id('dlv');
    const delivery: KeptDelivery = { id, event, endpoint, attempts: 0, nextAt: Date.now() + this.settings.delayMs, state: lost ? 'dropped' : 'waiting', lastStatus: null };
    this.world.store.put('delivery', id, delivery);
    if (!lost) this.schedule(delivery);
  }

  /** Sends events again: one by id, or all that never arrived. Answers how many. */
  resend(eventId?: string): number {
    return this.world.store.change(() => {
      const arrived = new Set(this.world.store.all('delivery').filter((each) => each.state === 'done').map((each) => each.event));
      const again = new Map<string, KeptDelivery>();
      for (const each of this.world.store.all('delivery')) {
        if (eventId === undefined ? !arrived.has(each.event) && each.state !== 'waiting' : each.event === eventId) again.set(`${each.event} ${each.endpoint}`, each);
      }
      for (const each of again.values()) this.add(each.event, each.endpoint, false);
      return again.size;
    });
  }

  private schedule(delivery: KeptDelivery): void {
    if (this.closed) return;
    const wait = Math.max(0, delivery.nextAt - Date.now()) + Math.random() * this.settings.shuffleMs;
    const timer = setTimeout(() => {
      this.timers.delete(delivery.id);
      const attempt = this.attempt(delivery.id).finally(() => this.underWay.delete(attempt));
      this.underWay.add(attempt);
    }, wait);
    timer.unref();
    this.timers.set(delivery.id, timer);
  }

  private async attempt(id: string): Promise<void> {
    const delivery = this.world.store.get('delivery', id);
    const endpoint = delivery && this.world.store.get('webhook_endpoint', delivery.endpoint);
    const event = delivery && this.world.store.get('event', delivery.event);
    if (!delivery || !endpoint || !event || delivery.state !== 'waiting' || this.closed) return;
    if (this.settings.paused) {
      this.schedule({ ...delivery, nextAt: Date.now() + 50 });
      return;
    }
    const payload = JSON.stringify(present(this.world, event), null, 2);
    const secret = this.world.store.get('note', `secret of ${endpoint.id}`)?.value ?? '';
    let status: number | null = null;
    try {
      const answer = await fetch(endpoint.url, {
        method: 'POST',
        headers: { 'Content-Type': 'application/json; charset=utf-8', 'Stripe-Signature': signatureHeader(payload, secret), 'User-Agent': 'Stripe/1.0 (+https://stripe.com/docs/webhooks)' },
        body: payload,
        redirect: 'manual',
        signal: AbortSignal.timeout(TIMEOUT_MS),
      });
      status = answer.status;
      await answer.arrayBuffer();
    } catch {
      status = null; // nobody answered: tried again like any other failure
    }
    this.settle(id, status);
  }

  private settle(id: string, status: number | null): void {
    const before = this.world.store.get('delivery', id);
    if (before === undefined || this.closed) return;
    const attempts = before.attempts + 1;
    const arrived = status !== null && status >= 200 && status < 300;
    const wait = Math.min(this.settings.retryBaseMs * 2 ** (attempts - 1), 3_600_000);
    const after: KeptDelivery = {
      ...before,
      attempts,
      lastStatus: status,
      nextAt: Date.now() + wait,
      state: arrived ? 'done' : attempts >= MOST_ATTEMPTS ? 'gave up' : 'waiting',
    };
    this.world.store.change(() => this.world.store.put('delivery', id, after));
    if (after.state === 'waiting') this.schedule(after);
  }

  /** Waits until nothing is left to send (or `timeoutMs` is over). For tests. */
  async quiet(timeoutMs = 10_000): Promise<boolean> {
    const until = Date.now() + timeoutMs;
    while (Date.now() < until) {
      if (this.underWay.size === 0 && !this.world.store.all('delivery').some((each) => each.state === 'waiting')) return true;
      await new Promise((done) => setTimeout(done, 10));
    }
    return false;
  }

  forget(): void {
    for (const timer of this.timers.values()) clearTimeout(timer);
    this.timers.clear();
  }

  async close(): Promise<void> {
    this.closed = true;
    this.forget();
    await Promise.allSettled(this.underWay);
  }
}
