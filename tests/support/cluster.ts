import { join } from 'node:path';
import { startPostgres } from '../../db/postgres.mjs';
import { root } from '../../src/launch/setup.mjs';
import { freePorts } from './ports.ts';

export interface Cluster {
  readonly url: (database: string) => string;
  readonly stop: () => void;
}

/** The database server of the checks: the one `npm test` started, or one of our own when a file is run by itself. */
export async function cluster(): Promise<Cluster> {
  const given = process.env['SKIDWAY_TEST_CLUSTER'];
  if (given) {
    return {
      url: (database) => given.replace(/\/[^/]*$/, `/${database}`),
      stop: () => {},
    };
  }
  const [port] = await freePorts(1);
  return startPostgres({ folder: join(root, '.data', 'test', 'postgres'), port: port ?? 0, throwaway: true });
}
