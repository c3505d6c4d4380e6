import { AsyncLocalStorage } from 'node:async_hooks';
import pg from 'pg';
import { QueryTypes, Sequelize, Transaction } from 'sequelize';
import { env } from './env.ts';

// Every query inside `inTransaction` joins its transaction without being told: one that forgot it would survive the rollback.
const contexts = new AsyncLocalStorage<Map<string, unknown>>();
const namespace = {
  bind: <F>(work: F): F => work,
  get: (key: string): unknown => contexts.getStore()?.get(key),
  set: (key: string, value: unknown): void => void contexts.getStore()?.set(key, value),
  run: (work: (context: unknown) => unknown): unknown => contexts.run(new Map(contexts.getStore()), () => work(undefined)),
};
Sequelize.useCLS(namespace);

// `date` columns are days, not instants: they stay the text they are.
pg.types.setTypeParser(pg.types.builtins.DATE, (text) => text);

function connect(): Sequelize {
  return new Sequelize(env().DATABASE_URL, {
    dialect: 'postgres',
    logging: false,
    pool: { max: env().DATABASE_POOL, min: 0, idle: 10_000, acquire: 20_000 },
    define: { timestamps: false, underscored: true, freezeTableName: true },
    // Compiling a statement pays for long ones only; a list's is over before.
    dialectOptions: { application_name: 'skidway', options: '-c jit=off', statement_timeout: 30_000, idle_in_transaction_session_timeout: 60_000 },
  });
}

const holder = globalThis as typeof globalThis & { skidwayDatabase?: Sequelize };

/** The one connection pool of this process (kept on `globalThis` so that a reloaded module finds it again). */
export const sequelize: Sequelize = (holder.skidwayDatabase ??= connect());

/** The transaction that the current code runs in, if any. */
export const currentTransaction = (): Transaction | undefined => namespace.get('transaction') as Transaction | undefined;

/**
 * Runs the work in one transaction, or in the caller's when there is one. Never `Promise.all` inside: a connection does one thing
 * at a time, and after an SQL error the transaction is dead.
 */
export async function inTransaction<T>(work: () => Promise<T>): Promise<T> {
  if (currentTransaction()) return work();
  return sequelize.transaction(() => work());
}

/**
 * Reads as of one instant, in several statements: what others commit meanwhile is seen wholly or not at all. For pages whose parts must
 * not contradict each other. Like `inTransaction` no `Promise.all` inside; nothing is written in it.
 */
export async function inSnapshot<T>(work: () => Promise<T>): Promise<T> {
  if (currentTransaction()) return work();
  return sequelize.transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.REPEATABLE_READ }, () => work());
}

/** Runs after the current transaction has committed; at once when there is none. For calls that must not happen on a rollback. */
export function afterCommit(work: () => void | Promise<void>): void {
  const transaction = currentTransaction();
  if (transaction) transaction.afterCommit(() => void work());
  else void work();
}

/** A SELECT (or INSERT … RETURNING) with `$1`-style parameters; rows with the column names as written in the SQL. */
export async function rows<Row extends object>(sql: string, bind: readonly unknown[] = []): Promise<Row[]> {
  return (await sequelize.query<Row>(sql, { bind: [...bind], type: QueryTypes.SELECT })) as Row[];
}

/** The first row, or undefined. */
export async function oneRow<Row extends object>(sql: string, bind: readonly unknown[] = []): Promise<Row | undefined> {
  return (await rows<Row>(sql, bind))[0];
}

/** An UPDATE, DELETE or INSERT; the number of rows it touched. */
export async function execute(sql: string, bind: readonly unknown[] = []): Promise<number> {
  const [, meta] = await sequelize.query(sql, { bind: [...bind], type: QueryTypes.RAW });
  return (meta as { rowCount?: number | null } | undefined)?.rowCount ?? 0;
}

/**
 * Takes the transaction-long lock of a thing that has no row of its own to lock (a sawyer's calendar).
 * @throws when called outside a transaction, where the lock would be let go at once.
 */
export async function lockFor(kind: string, id: string): Promise<void> {
  if (!currentTransaction()) throw new Error('lockFor needs a transaction');
  await sequelize.query('SELECT pg_advisory_xact_lock(hashtextextended($1, 0))', { bind: [`${kind}:${id}`] });
}

/** Whether the error is the database refusing a duplicate or an overlap of the named constraint. */
export function refusedBy(error: unknown, constraint: string): boolean {
  const original = (error as { original?: { constraint?: string } } | null)?.original ?? (error as { parent?: { constraint?: string } } | null)?.parent;
  return original?.constraint === constraint;
}
