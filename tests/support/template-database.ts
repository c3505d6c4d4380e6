import type { TestProject } from 'vitest/node';
import pg from 'pg';
import { ensureDatabase, migrate } from '../../db/migrate.ts';
import { cluster } from './cluster.ts';

declare module 'vitest' {
  interface ProvidedContext {
    templateUrl: string;
  }
}

/** Makes one migrated database that every file of `tests/server` clones. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await cluster();
  const name = `skidway_template_${process.pid}`;
  const url = server.url(name);
  await ensureDatabase(url);
  await migrate(url);
  project.provide('templateUrl', url);
  return async () => {
    const client = new pg.Client({ connectionString: server.url('postgres') });
    await client.connect();
    await client.query(`DROP DATABASE IF EXISTS ${name} WITH (FORCE)`);
    await client.end();
    server.stop();
  };
}
