import { spawnSync } from 'node:child_process';
import { mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { ensureDatabase, migrate } from '../../db/migrate.ts';
import { localEnvironment, portsFrom } from '../../src/launch/local-env.mjs';
import { ensureBuild, root } from '../../src/launch/setup.mjs';
import { portAnswers, processGroup, startFakes } from '../../src/launch/supervise.mjs';
import { cluster } from './cluster.ts';
import { freeBase } from './ports.ts';

export interface Product {
  /** Where the built server answers, as a browser would ask for it. */
  readonly origin: string;
  readonly mailPage: string;
  readonly payments: string;
  /** The environment that the server and worker run with: for a check that runs a command of ours beside them. */
  readonly environment: Readonly<Record<string, string>>;
  /** Runs a script of ours (`tsx`) with that environment; throws when it fails. */
  readonly script: (file: string, ...args: string[]) => string;
  readonly stop: () => Promise<void>;
}

/** Starts the whole product (stand-ins, worker, built server) on free ports with an empty database of its own. */
export async function startProduct(name: string, options: { story?: boolean } = {}): Promise<Product> {
  ensureBuild();
  const server = await cluster();
  const base = await freeBase();
  const ports = portsFrom(base);
  const data = join(root, '.data', 'test', name);
  rmSync(data, { recursive: true, force: true });
  mkdirSync(data, { recursive: true });
  const databaseUrl = server.url(`skidway_${name}_${process.pid}`);
  await ensureDatabase(databaseUrl);
  await migrate(databaseUrl);
  const environment = { ...localEnvironment({ base, databaseUrl, dataFolder: data }), LOG_LEVEL: process.env['PRODUCT_LOG'] ?? 'error' };
  const group = processGroup((part, code) => console.error(`${part} ended during the checks (exit code ${code})`));
  const script = (file: string, ...args: string[]): string => {
    const result = spawnSync(process.execPath, ['--import', 'tsx', join(root, file), ...args], { cwd: root, encoding: 'utf8', env: { ...process.env, ...environment } });
    if (result.status !== 0) throw new Error(`${file} failed:\n${result.stdout}${result.stderr}`);
    return result.stdout;
  };
  const stop = async (): Promise<void> => {
    await group.stop();
    server.stop();
  };
  try {
    await startFakes(group, environment, ports, join(data, 'fakes'));
    await group.start('web', 'dist/server/front.mjs', [], environment).ready;
    await portAnswers(ports.web);
    // As `npm start` does it: the worker begins when the story is told.
    if (options.story) script('db/story/tell.ts');
    await group.start('worker', 'src/server/jobs/main.ts', [], environment).ready;
  } catch (error) {
    await stop();
    throw error;
  }
  return { origin: environment.ORIGIN, mailPage: `http://localhost:${ports.mailPage}`, payments: environment.PAYMENTS_URL, environment, script, stop };
}
