import PgBoss from 'pg-boss';
import { currentTransaction, inTransaction } from '../db.ts';
import type { Jobs } from './jobs.ts';

interface RawConnection {
  query(text: string, values: unknown[]): Promise<{ rows: unknown[] }>;
}

// A sender only: it never starts, polls nothing, and writes through the transaction at hand.
const sender = new PgBoss({
  db: {
    async executeSql(text: string, values: unknown[]) {
      const connection = (currentTransaction() as unknown as { connection?: RawConnection } | undefined)?.connection;
      if (!connection) throw new Error('enqueue needs a transaction');
      return (await connection.query(text, values)) as { rows: never[] };
    },
  },
});

/**
 * Puts a job in its queue in the current transaction (or one of its own), so that it exists exactly when the deed does.
 * @throws when the queue does not exist: the job would vanish without a word.
 */
export async function enqueue<Name extends keyof Jobs>(name: Name, payload: Jobs[Name], options: { startAfter?: Date } = {}): Promise<void> {
  await inTransaction(async () => {
    const id = await sender.send(name, payload as object, options.startAfter ? { startAfter: options.startAfter } : {});
    if (id === null) throw new Error(`The queue ${name} does not exist: declare it in jobs/jobs.ts and migrate.`);
  });
}

