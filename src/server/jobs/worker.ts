import PgBoss from 'pg-boss';
import { sequelize } from '../db.ts';
import { env } from '../env.ts';
import { log } from '../log.ts';
import { handlers } from './handlers/index.ts';
import { queues, type Jobs } from './jobs.ts';

/** How many of a kind one worker does at once; of the others one. */
const sideBySide: Partial<Record<keyof Jobs, number>> = { 'send-mail': 4, 'make-provider-call': 2, 'handle-provider-event': 2 };

/**
 * Starts working every queue in this process. Any number of workers may run side by side.
 * @returns a function that stops taking jobs, finishes those in hand and resolves.
 */
export async function startWorker(): Promise<() => Promise<void>> {
  const boss = new PgBoss({ connectionString: env().DATABASE_URL, migrate: false, max: 4, application_name: 'skidway worker' });
  boss.on('error', (error) => log().error({ err: error }, 'queue'));
  await boss.start();
  for (const name of Object.keys(queues) as (keyof Jobs)[]) {
    const handle = handlers[name] as ((payload: unknown) => Promise<void>) | undefined;
    if (!handle) continue;
    for (let beside = 0; beside < (sideBySide[name] ?? 1); beside += 1) await work(boss, name, handle);
  }
  await boss.schedule('sweep', '* * * * *', {});
  return async () => {
    await boss.stop({ graceful: true, timeout: 15_000 });
    await sequelize.close();
  };
}

/** One loop over a queue, one job at a time. It rests half a second when the queue is empty, and not at all while there is work. */
async function work(boss: PgBoss, name: keyof Jobs, handle: (payload: unknown) => Promise<void>): Promise<void> {
  const loop: string = await boss.work(name, { pollingIntervalSeconds: 0.5, batchSize: 1 }, async ([job]) => {
    if (!job) return;
    boss.notifyWorker(loop);
    try {
      await handle(job.data);
    } catch (error) {
      log().error({ err: error, queue: name, job: job.id }, 'job failed, will be tried again');
      throw error;
    }
  });
}
