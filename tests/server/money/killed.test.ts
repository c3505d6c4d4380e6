import { spawn, type ChildProcess } from 'node:child_process';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { reconcile } from '~/server/commands/reconcile.ts';
import { retryProviderCall } from '~/server/commands/retry-provider-call.ts';
import { Refusal } from '~/server/errors.ts';
import { ProviderCall, type Booking } from '~/server/models/index.ts';
import { ApiError } from '../../../fakes/stripe/errors.ts';
import { root } from '../../../src/launch/setup.mjs';
import { makeCast, type Cast } from '../../support/cast.ts';
import { makeAgreedBooking, makePayoutAccount, openMoneyHouse, type MoneyHouse } from '../../support/money-market.ts';
import type { Asked } from '../../support/money-web.ts';
import { wrongs } from '../../support/money-wrongs.ts';
import { freePorts } from '../../support/ports.ts';
import { generator } from '../../support/random.ts';

/**
 * Random sequences of deeds in a web process and a worker of their own, either of which is killed with SIGKILL at any instant, in the
 * middle of a transaction or of a call to the provider. Afterwards everything comes to rest and the identities of money hold. The seed
 * is printed; KILLED_SEED repeats one, KILLED_SEQUENCES=1000 runs the long form.
 */
const SEQUENCES = Number(process.env['KILLED_SEQUENCES'] ?? 1);
const FIRST_SEED = Number(process.env['KILLED_SEED'] ?? Math.floor(Math.random() * 1e9));
const STEPS = 15;
const KILL_EVERY = 5;

/** A program of ours that can be killed and started again. */
class Part {
  private child: ChildProcess | undefined;
  killed = 0;

  constructor(
    private readonly file: string,
    private readonly args: readonly string[],
  ) {}

  async start(): Promise<void> {
    const child = spawn(process.execPath, ['--import', 'tsx', join(root, this.file), ...this.args], { cwd: root, env: process.env, stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
    this.child = child;
    await new Promise<void>((resolve, reject) => {
      child.once('message', () => resolve());
      child.once('exit', () => reject(new Error(`${this.file} ended before it was ready`)));
    });
  }

  async kill(): Promise<void> {
    const { child } = this;
    if (!child || child.exitCode !== null || child.signalCode !== null) return;
    const gone = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGKILL');
    await gone;
    this.killed += 1;
  }
}

let house: MoneyHouse;
let cast: Cast;
let web: Part;
let worker: Part;
let door = '';

beforeAll(async () => {
  const [port = 0] = await freePorts(1);
  door = `http://127.0.0.1:${port}`;
  house = await openMoneyHouse(`${door}/messages`);
  cast = await makeCast();
  house.fake.control.topUp(100_000_000);
  await reconcile(new Date());
  web = new Part('tests/support/money-web.ts', [String(port)]);
  worker = new Part('src/server/jobs/main.ts', []);
  await Promise.all([web.start(), worker.start()]);
}, 120_000);
afterAll(async () => {
  await Promise.all([web.kill(), worker.kill()]);
  await house.close();
});

/** Asks the web process; a refusal or a process that is killed in the middle answers nothing. */
async function ask(asked: Asked): Promise<string | null> {
  const answer = await fetch(`${door}/deed`, { method: 'POST', body: JSON.stringify(asked) }).catch(() => null);
  const text = answer ? await answer.text().catch(() => '') : '';
  return answer?.ok ? text : null;
}

interface Scene {
  readonly random: () => number;
  readonly bookings: readonly Booking[];
  readonly urls: string[];
}
const pick = <T>(scene: Scene, list: readonly T[]): T | undefined => list[Math.floor(scene.random() * list.length)];
const sessionIn = (url: string): string => new URL(url).pathname.split('/').at(-1) ?? '';

/** What the world outside does. It may be refused: a card that was used, a dispute that is closed. */
function outside(work: () => unknown): void {
  try {
    work();
  } catch (error) {
    if (!(error instanceof ApiError)) throw error;
  }
}

async function step(scene: Scene): Promise<void> {
  const { control } = house.fake;
  const booking = pick(scene, scene.bookings);
  if (!booking) return;
  const chance = scene.random();
  const asked = { booking: booking.number, by: cast.ada.id };
  if (chance < 0.25) {
    const url = await ask({ ...asked, deed: chance < 0.17 ? 'pay' : chance < 0.21 ? 'top-up' : 'increase' });
    if (url?.startsWith('http')) scene.urls.push(url);
  } else if (chance < 0.45) outside(() => control.pay(sessionIn(scene.urls.at(-1) ?? 'http://x/none')));
  else if (chance < 0.62) await ask({ ...asked, deed: 'sign', cents: 1_000 * Math.ceil(scene.random() * 80) });
  else if (chance < 0.68) await ask({ ...asked, deed: 'cancel', by: scene.random() < 0.5 ? cast.ada.id : cast.bram.id });
  else if (chance < 0.74) await ask({ ...asked, deed: 'accept held', by: cast.bram.id });
  else if (chance < 0.8) control.fault({ on: pick(scene, ['POST /v1/transfers', 'POST /v1/refunds', 'POST /v1/checkout/sessions']) ?? '*', times: 2, effect: pick(scene, ['fail after', 'drop'] as const) ?? 'drop', status: 500 });
  else if (chance < 0.85) {
    const charge = pick(scene, control.objects('charge').filter((one) => one.status === 'succeeded' && !one.disputed && one.transfer_group !== null));
    if (charge && scene.random() < 0.4) outside(() => control.openDispute(charge.id));
  } else if (chance < 0.9) {
    const open = pick(scene, control.objects('dispute').filter(({ status }) => status === 'needs_response'));
    if (open) outside(() => control.closeDispute(open.id, scene.random() < 0.5 ? 'won' : 'lost'));
  } else await ask({ ...asked, deed: chance < 0.95 ? 'reconcile' : 'check checkouts' });
}

/** Lets two or three things happen, and kills a process while they do. */
async function killInTheMiddle(scene: Scene): Promise<void> {
  const parts = scene.random() < 0.2 ? [web, worker] : [scene.random() < 0.5 ? web : worker];
  const under = Promise.all([step(scene), step(scene), step(scene)]);
  await new Promise((done) => setTimeout(done, scene.random() * 120));
  await Promise.all(parts.map((part) => part.kill()));
  await under;
  await Promise.all(parts.map((part) => part.start()));
}

/** No more troubles: lost messages come again, claims of the dead run out, a moderator tries stuck calls again. */
async function settleDown({ bookings }: Scene): Promise<void> {
  house.fake.control.clearFaults();
  await worker.kill();
  for (let round = 0; round < 4; round += 1) {
    house.fake.control.resend();
    await house.work(8);
    for (const call of await ProviderCall.findAll({ where: { status: 'stuck', bookingId: bookings.map(({ id }) => id) } })) {
      await retryProviderCall(cast.mo, call.id, new Date()).catch((error: unknown) => {
        if (!(error instanceof Refusal)) throw error;
      });
    }
  }
  await house.work(8);
  await worker.start();
}

describe(`money when processes are killed, seeds from ${FIRST_SEED}`, () => {
  it(`balances after each of ${SEQUENCES} random sequences`, { timeout: 120_000 + SEQUENCES * 60_000 }, async () => {
    for (let sequence = 0; sequence < SEQUENCES; sequence += 1) {
      const seed = FIRST_SEED + sequence;
      const scene: Scene = { random: generator(seed), urls: [], bookings: await Promise.all([makeAgreedBooking(cast.ada, cast.bram), makeAgreedBooking(cast.ada, cast.bram)]) };
      await makePayoutAccount(house, cast.bram);
      for (const { number } of scene.bookings) {
        const url = await ask({ deed: 'pay', by: cast.ada.id, booking: number });
        if (url) scene.urls.push(url);
        if (url) outside(() => house.fake.control.pay(sessionIn(url)));
      }
      for (let at = 0; at < STEPS; at += 1) await (at % KILL_EVERY === KILL_EVERY - 1 ? killInTheMiddle(scene) : step(scene));
      await settleDown(scene);
      expect(await wrongs(house, scene.bookings), `seed ${seed}`).toEqual([]);
    }
    expect(web.killed + worker.killed).toBeGreaterThanOrEqual(SEQUENCES * 2);
  });
});
