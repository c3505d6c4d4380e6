import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { root } from '../../../src/launch/setup.mjs';

/** A booking with the people it belongs to, as `make-job.ts` makes it. */
export interface Job {
  readonly number: number;
  readonly landowner: string;
  readonly sawyer: string;
  readonly password: string;
}

const productEnvironment = (): Record<string, string> => JSON.parse(process.env['E2E_PRODUCT'] ?? '{}') as Record<string, string>;
const tsx = (file: string, ...args: string[]): string[] => ['--import', 'tsx', join(root, file), ...args];

function run(file: string, ...args: string[]): string {
  const { status, stdout, stderr } = spawnSync(process.execPath, tsx(file, ...args), { cwd: root, encoding: 'utf8', env: { ...process.env, ...productEnvironment() } });
  if (status !== 0) throw new Error(`${file} failed:\n${stdout}${stderr}`);
  return stdout;
}

/** Makes bookings beside the running product, each of two people of its own: held, or agreed with the hold still to be paid. */
export const makeJobs = (count: number, standing: 'held' | 'agreed' = 'held'): Job[] => run('tests/e2e/support/make-job.ts', standing, String(count)).trim().split('\n').slice(-count).map((line) => JSON.parse(line) as Job);

/** Makes one such booking. */
export function makeJob(standing: 'held' | 'agreed' = 'held'): Job {
  const [job] = makeJobs(1, standing);
  if (!job) throw new Error('No booking was made.');
  return job;
}

/** Ends every session of an account, as if a month had passed. */
export const expireSessions = (email: string): void => void run('tests/e2e/support/expire-sessions.ts', email);

const freePort = (): Promise<number> =>
  new Promise((resolve) => {
    const probe = createServer().listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === 'object' && address ? address.port : 0));
    });
  });

/** A web process of a check's own on the product's database, which it may stop and start while others go on using theirs. */
export interface OwnWeb {
  readonly origin: string;
  readonly start: () => Promise<void>;
  readonly stop: () => Promise<void>;
}

export async function ownWeb(): Promise<OwnWeb> {
  const port = await freePort();
  const origin = `http://localhost:${port}`;
  let child: ChildProcess | undefined;
  const start = async (): Promise<void> => {
    child = spawn(process.execPath, [join(root, 'dist/server/front.mjs')], { cwd: root, stdio: 'ignore', env: { ...process.env, ...productEnvironment(), PORT: String(port), ORIGIN: origin } });
    for (let tries = 0; tries < 300; tries += 1) {
      const answer = await fetch(`${origin}/api/health/live`).catch(() => null);
      if (answer?.ok) return;
      await new Promise((done) => setTimeout(done, 100));
    }
    throw new Error('The web process did not start.');
  };
  const stop = (): Promise<void> =>
    new Promise((done) => {
      if (!child || child.exitCode !== null) return done();
      child.once('exit', () => done());
      child.kill('SIGKILL');
    });
  await start();
  return { origin, start, stop };
}

/** What the provider's stand-in charged for a booking, in cents, charge by charge. */
export async function chargesOf(booking: number): Promise<number[]> {
  const address = productEnvironment()['PAYMENTS_URL'] ?? '';
  const { charge } = (await (await fetch(`${address}/_control/objects`)).json()) as { charge: { amount: number; paid: boolean; transfer_group: string | null }[] };
  return charge.filter(({ paid, transfer_group }) => paid && transfer_group === `booking-${booking}`).map(({ amount }) => amount);
}
