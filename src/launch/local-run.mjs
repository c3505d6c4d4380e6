// The environment of the product on this machine, for a command that is run beside it: what `npm start` gives its parts.
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { startPostgres } from '../../db/postgres.mjs';
import { localEnvironment, portsFrom } from './local-env.mjs';
import { root } from './setup.mjs';

/**
 * Sets this process's environment as the local run has it. A server has its own: with `DATABASE_URL` set nothing is touched.
 * @throws when the local product is not running
 */
export function useLocalRun() {
  if (process.env.DATABASE_URL) return;
  if (existsSync(join(root, '.env'))) process.loadEnvFile(join(root, '.env'));
  const base = Number(process.env.SKIDWAY_PORT_BASE ?? 4321);
  const data = join(root, '.data');
  const database = startPostgres({ folder: join(data, 'postgres'), port: portsFrom(base).postgres });
  if (database.started) {
    database.stop();
    throw new Error('The product is not running here. Begin with `npm start`, or set the environment that docker-free-dev.md lists.');
  }
  Object.assign(process.env, localEnvironment({ base, databaseUrl: database.url('skidway'), dataFolder: data }));
}
