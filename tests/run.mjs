// `npm test`: the same set-up as `npm start`, on a database of its own, then every check. The last line is the sum over all runners.
import { spawn } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync, existsSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { startPostgres } from '../db/postgres.mjs';
import { localEnvironment } from '../src/launch/local-env.mjs';
import { ensureBuild, ensureDependencies, ensureSystemPackages, root } from '../src/launch/setup.mjs';

ensureSystemPackages({ browser: true });
ensureDependencies();

/** The first of seven free ports in a row. */
async function freeBase() {
  const free = (port) => new Promise((resolve) => {
    const server = createServer().once('error', () => resolve(false)).once('listening', () => server.close(() => resolve(true)));
    server.listen(port, '127.0.0.1');
  });
  for (let base = 20_000 + Math.floor(Math.random() * 20_000); ; base += 10) {
    const answers = await Promise.all(Array.from({ length: 7 }, (_, index) => free(base + index)));
    if (answers.every(Boolean)) return base;
  }
}

const data = join(root, '.data', 'test');
mkdirSync(data, { recursive: true });
const base = await freeBase();
const database = startPostgres({ folder: join(data, 'postgres'), port: base + 5, throwaway: true });
const env = { ...process.env, ...localEnvironment({ base, databaseUrl: database.url('skidway_test'), dataFolder: data }), SKIDWAY_TEST_CLUSTER: database.url('postgres'), LOG_LEVEL: 'error' };

let passed = 0;
let failed = 0;

/** Runs a program to its end, its output shown. */
const run = (program, args, extra = {}) => new Promise((resolve) => {
  const child = spawn(program, args, { cwd: root, stdio: 'inherit', env: { ...env, ...extra } });
  child.once('exit', (code) => resolve(code ?? 1));
});

const bin = (name) => join(root, 'node_modules', '.bin', name);

/** A check that is one program: it passes or fails as a whole. */
async function check(name, program, args) {
  console.log(`\n== ${name}`);
  const code = await run(program, args);
  if (code === 0) passed += 1;
  else {
    failed += 1;
    console.error(`FAILED: ${name}`);
  }
  return code === 0;
}

/** A runner that reports in JSON; `read` counts it. */
async function runner(name, program, args, report, read, extra) {
  console.log(`\n== ${name}`);
  rmSync(report, { force: true });
  const code = await run(program, args, extra);
  const counts = existsSync(report) ? read(JSON.parse(readFileSync(report, 'utf8'))) : { passed: 0, failed: 0 };
  passed += counts.passed;
  // A runner that ends badly without saying which check failed still counts as a failure.
  failed += code !== 0 && counts.failed === 0 ? 1 : counts.failed;
}

/** A file that could not be run at all has no check that failed, and counts as one. */
const vitestCounts = (report) => ({ passed: report.numPassedTests, failed: report.numFailedTests + report.testResults.filter((file) => file.status === 'failed' && !file.assertionResults.some((one) => one.status === 'failed')).length });
const playwrightCounts = (report) => ({ passed: report.stats.expected, failed: report.stats.unexpected + report.stats.flaky });

try {
  ensureBuild();
  await check('types', bin('astro'), ['check', '--minimumFailingSeverity', 'error']);
  const unit = join(data, 'vitest.json');
  await runner('rules, reference values, server, http', bin('vitest'), ['run', '--config', 'tests/vitest.config.ts', '--reporter=default', '--reporter=json', `--outputFile.json=${unit}`], unit, vitestCounts);
  if (existsSync(join(root, 'tests/e2e/playwright.config.ts'))) {
    const e2e = join(data, 'playwright.json');
    await runner('journeys in Chromium', bin('playwright'), ['test', '--config', 'tests/e2e/playwright.config.ts'], e2e, playwrightCounts, { PLAYWRIGHT_JSON_OUTPUT_NAME: e2e });
  }
} catch (error) {
  failed += 1;
  console.error(error);
} finally {
  database.stop();
}

console.log(`\n${passed} passed, ${failed} failed`);
process.exit(failed === 0 && passed > 0 ? 0 : 1);
