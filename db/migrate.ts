import { readdir, readFile } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import pg from 'pg';
import PgBoss from 'pg-boss';
import { Umzug, type UmzugStorage } from 'umzug';
import { queues } from '../src/server/jobs/jobs.ts';

const folder = fileURLToPath(new URL('./migrations', import.meta.url));

/** Which migrations have run, in a table of our own. */
function storage(client: pg.Client): UmzugStorage {
  return {
    async logMigration({ name }) {
      await client.query('INSERT INTO migration (name) VALUES ($1)', [name]);
    },
    async unlogMigration({ name }) {
      await client.query('DELETE FROM migration WHERE name = $1', [name]);
    },
    async executed() {
      await client.query('CREATE TABLE IF NOT EXISTS migration (name text PRIMARY KEY, at timestamptz NOT NULL DEFAULT now())');
      return (await client.query<{ name: string }>('SELECT name FROM migration ORDER BY name')).rows.map((row) => row.name);
    },
  };
}

/** Makes the database of the address when it is not there yet. @returns whether it was made. */
export async function ensureDatabase(databaseUrl: string): Promise<boolean> {
  const url = new URL(databaseUrl);
  const name = url.pathname.slice(1);
  url.pathname = '/postgres';
  const client = new pg.Client({ connectionString: url.href });
  await client.connect();
  try {
    const known = await client.query('SELECT 1 FROM pg_database WHERE datname = $1', [name]);
    if (known.rowCount) return false;
    await client.query(`CREATE DATABASE ${pg.escapeIdentifier(name)}`);
    return true;
  } finally {
    await client.end();
  }
}

/**
 * Brings the database to the newest form: every SQL file of `migrations/` in the order of its name, each in a transaction, and the
 * queues. An advisory lock keeps two starters apart.
 * @returns the names of the migrations that ran now
 */
export async function migrate(databaseUrl: string): Promise<string[]> {
  const client = new pg.Client({ connectionString: databaseUrl });
  await client.connect();
  try {
    await client.query("SET client_min_messages = 'warning'");
    await client.query('SELECT pg_advisory_lock(7203001)');
    const names = (await readdir(folder)).filter((name) => name.endsWith('.sql')).sort();
    const umzug = new Umzug({
      migrations: names.map((name) => ({
        name,
        async up() {
          const sql = await readFile(join(folder, name), 'utf8');
          await client.query(`BEGIN;\n${sql}\nCOMMIT;`).catch(async (error: unknown) => {
            await client.query('ROLLBACK');
            throw new Error(`${basename(name)}: ${error instanceof Error ? error.message : String(error)}`);
          });
        },
      })),
      storage: storage(client),
      logger: undefined,
    });
    const ran = await umzug.up();
    await declareQueues(databaseUrl);
    return ran.map((step) => step.name);
  } finally {
    await client.end();
  }
}

async function declareQueues(databaseUrl: string): Promise<void> {
  const boss = new PgBoss({ connectionString: databaseUrl, supervise: false, schedule: false, max: 2 });
  boss.on('error', () => {});
  await boss.start();
  try {
    for (const [name, options] of Object.entries(queues)) {
      if (await boss.getQueue(name)) await boss.updateQueue(name, { name, ...options });
      else await boss.createQueue(name, { name, ...options });
    }
  } finally {
    await boss.stop({ graceful: false });
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const url = process.env['DATABASE_URL'];
  if (!url) throw new Error('DATABASE_URL is not set.');
  await ensureDatabase(url);
  const ran = await migrate(url);
  console.log(ran.length ? `Migrated: ${ran.join(', ')}` : 'The database is up to date.');
  process.exit(0);
}
