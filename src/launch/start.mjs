// `npm start`: the whole product on one machine, from nothing. A second start takes seconds; Ctrl-C stops all that this started.
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { startPostgres } from '../../db/postgres.mjs';
import { localEnvironment, portsFrom } from './local-env.mjs';
import { ensureBuild, ensureDependencies, ensureSystemPackages, root } from './setup.mjs';
import { portAnswers, processGroup, startFakes } from './supervise.mjs';

if (existsSync(join(root, '.env'))) process.loadEnvFile(join(root, '.env'));
const base = Number(process.env.SKIDWAY_PORT_BASE ?? 4321);
const ports = portsFrom(base);
const data = join(root, '.data');

ensureSystemPackages({ browser: false });
ensureDependencies();

const database = startPostgres({ folder: join(data, 'postgres'), port: ports.postgres });
const env = localEnvironment({ base, databaseUrl: database.url('skidway'), dataFolder: data });

let leaving = false;
async function leave(code) {
  if (leaving) return;
  leaving = true;
  await group.stop();
  database.stop();
  process.exit(code);
}
const group = processGroup((name, code) => {
  console.error(`${name} ended unexpectedly (exit code ${code}); stopping the rest.`);
  void leave(1);
});
for (const signal of ['SIGINT', 'SIGTERM']) {
  process.on(signal, () => {
    if (!leaving) console.log('\nStopping');
    void leave(0);
  });
}

/** Runs one of our scripts to its end. */
function must(file, ...args) {
  const result = spawnSync(process.execPath, ['--import', 'tsx', join(root, file), ...args], { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } });
  if (result.status !== 0) void leave(1);
  return result.status === 0;
}

try {
  ensureBuild();
  if (must('db/migrate.ts')) {
    await startFakes(group, env, ports, join(data, 'fakes'));
    await group.start('web', 'dist/server/front.mjs', [], env).ready;
    await portAnswers(ports.web);
    // The story is told before the worker begins: it does the worker's part itself, at the instants it tells of.
    if (must('db/story/tell.ts')) {
      await group.start('worker', 'src/server/jobs/main.ts', [], env).ready;
      console.log(`
Skidway is ready:            ${env.ORIGIN}
Messages it sent (mailbox):  http://localhost:${ports.mailPage}
Payment stand-in:            ${env.PAYMENTS_PAGE_ORIGIN}

Demo accounts, all with the password "boards-in-hand":
  landowner  ada@skidway.example
  sawyer     bram@skidway.example
  moderator  mo@skidway.example   (second factor: npx tsx db/demo-code.ts shows the code of the moment)

Ctrl-C stops everything.`);
    }
  }
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  await leave(1);
}
