// What a fresh machine lacks is brought here: Debian's packages and the locked dependencies. No import outside Node itself.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { copyFileSync, existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { postgresInstalled } from '../../db/postgres.mjs';

/** The folder of the checkout, without a slash at its end. */
export const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

function must(program, args, why) {
  const result = spawnSync(program, args, { cwd: root, stdio: 'inherit', env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } });
  if (result.status !== 0) {
    console.error(`\n${why}\nThe command was: ${program} ${args.join(' ')}`);
    process.exit(1);
  }
}

/**
 * Installs from Debian's packages whatever of the asked is missing.
 * @param {{ browser: boolean }} wanted browser: Chromium too, and what reads PDFs and calendars back, for the checks
 */
export function ensureSystemPackages({ browser }) {
  const missing = [];
  if (!postgresInstalled()) missing.push('postgresql-15', 'postgresql-15-postgis-3');
  if (browser && !existsSync('/usr/bin/chromium')) missing.push('chromium');
  if (browser && !existsSync('/usr/bin/pdftotext')) missing.push('poppler-utils');
  if (browser && !existsSync('/usr/lib/python3/dist-packages/icalendar')) missing.push('python3-icalendar');
  if (missing.length === 0) return;
  console.log(`Installing from Debian: ${missing.join(', ')}`);
  const root = process.getuid?.() === 0;
  const apt = root ? ['apt-get', []] : ['sudo', ['apt-get']];
  // Debian would otherwise make and start a cluster of its own, which nobody here asked for.
  if (root && missing.includes('postgresql-15') && !existsSync('/etc/postgresql-common/createcluster.conf')) {
    mkdirSync('/etc/postgresql-common', { recursive: true });
    writeFileSync('/etc/postgresql-common/createcluster.conf', 'create_main_cluster = false\n');
  }
  must(apt[0], [...apt[1], 'update', '-q'], 'The list of Debian packages could not be read.');
  must(apt[0], [...apt[1], 'install', '-y', '-q', '--no-install-recommends', '-o', 'Dpkg::Options::=--force-confold', ...missing], 'Debian packages could not be installed.');
}

/** Runs `npm ci` unless node_modules was made from this very lock file. */
export function ensureDependencies() {
  const lock = join(root, 'package-lock.json');
  const mark = join(root, 'node_modules', '.skidway-lock');
  if (existsSync(mark) && readFileSync(mark, 'utf8') === readFileSync(lock, 'utf8')) return;
  console.log('Installing dependencies');
  must('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], 'The dependencies could not be installed.');
  copyFileSync(lock, mark);
}

function* files(folder) {
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const path = join(folder, entry.name);
    if (entry.isDirectory()) yield* files(path);
    else yield path;
  }
}

/** Builds the application unless the build at hand was made from these very sources. */
export function ensureBuild() {
  const hash = createHash('sha256');
  for (const name of ['src', 'public', 'fonts']) {
    const folder = join(root, name);
    if (existsSync(folder)) for (const file of [...files(folder)].sort()) hash.update(file).update(readFileSync(file));
  }
  for (const name of ['astro.config.mjs', 'tailwind.config.mjs', 'tsconfig.json', 'package-lock.json']) hash.update(readFileSync(join(root, name)));
  const wanted = hash.digest('hex');
  const mark = join(root, 'dist', '.sources');
  if (existsSync(mark) && readFileSync(mark, 'utf8') === wanted) return;
  console.log('Building');
  // Said outright: under the test runner NODE_ENV is `test`, and islands built so call a development function that is not there.
  const env = { ...process.env, NODE_ENV: 'production', ASTRO_TELEMETRY_DISABLED: '1' };
  const result = spawnSync(process.execPath, [join(root, 'node_modules/astro/astro.js'), 'build', '--silent'], { cwd: root, stdio: 'inherit', env });
  if (result.status !== 0) process.exit(1);
  writeFileSync(mark, wanted);
}
