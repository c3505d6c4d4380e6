// Starts a PostgreSQL 15 cluster of our own on loopback, as a user that is not root. Plain JavaScript without dependencies: it
// runs before anything is installed.
import { execFileSync, spawnSync } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import { chownSync, existsSync, mkdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';

const binaries = '/usr/lib/postgresql/15/bin';

/** Whether PostgreSQL 15 and PostGIS are installed from Debian's packages. */
export const postgresInstalled = () =>
  existsSync(join(binaries, 'postgres')) && existsSync('/usr/share/postgresql/15/extension/postgis.control');

/** The user the server runs as: ourselves, or `postgres` when we are root (the server refuses root). */
function serverUser() {
  if (process.getuid?.() !== 0) return null;
  const id = (flag) => Number(execFileSync('id', [flag, 'postgres'], { encoding: 'utf8' }).trim());
  return { uid: id('-u'), gid: id('-g') };
}

function run(user, program, args) {
  const result = spawnSync(join(binaries, program), args, {
    ...(user ?? {}),
    cwd: '/',
    encoding: 'utf8',
    env: { PATH: process.env.PATH, LC_ALL: 'C.UTF-8' },
    // pg_ctl hands its output to the server it starts, so a pipe here would never close.
    stdio: program === 'pg_ctl' ? 'ignore' : 'pipe',
  });
  return { code: result.status ?? 1, text: `${result.stdout ?? ''}${result.stderr ?? ''}` };
}

/**
 * The folder that holds the cluster: the asked one, or, where the server's user cannot enter the way to it (a clone in root's
 * home), a system folder with a link from the asked one.
 */
function dataFolder(asked, user) {
  if (!user) {
    mkdirSync(asked, { recursive: true });
    return asked;
  }
  mkdirSync(dirname(asked), { recursive: true });
  const reachable = spawnSync('test', ['-x', dirname(asked)], { ...user, cwd: '/' }).status === 0;
  const real = reachable ? asked : join('/var/lib/skidway', createHash('sha256').update(asked).digest('hex').slice(0, 12));
  if (!existsSync(real)) {
    mkdirSync(real, { recursive: true });
    chownSync(real, user.uid, user.gid);
  }
  if (real !== asked && !existsSync(asked)) symlinkSync(real, asked);
  return real;
}

/**
 * Starts the cluster under `folder` on 127.0.0.1:`port`, making it first when it is not there.
 * @param {{ folder: string, port: number, throwaway?: boolean }} options throwaway: no fsync, for tests
 * @returns {{ url: (database: string) => string, started: boolean, stop: () => void }}
 *   `started` is false when a server on this folder was running already; then `stop` leaves it alone.
 */
export function startPostgres({ folder, port, throwaway = false }) {
  const asked = resolve(folder);
  const user = serverUser();
  const data = dataFolder(asked, user);
  const passwordFile = `${asked}.password`;

  if (!existsSync(join(data, 'PG_VERSION'))) {
    const password = randomBytes(18).toString('hex');
    writeFileSync(passwordFile, password, { mode: 0o600 });
    const handed = join(tmpdir(), `skidway-${randomBytes(6).toString('hex')}`);
    writeFileSync(handed, password, { mode: 0o600 });
    if (user) chownSync(handed, user.uid, user.gid);
    const made = run(user, 'initdb', ['-D', data, '-U', 'skidway', '--auth=scram-sha-256', `--pwfile=${handed}`, '-E', 'UTF8', '--locale=C.UTF-8']);
    rmSync(handed);
    if (made.code !== 0) throw new Error(`PostgreSQL could not make its data folder ${data}:\n${made.text}`);
  }

  const urlOn = (at) => (database) => `postgres://skidway:${readFileSync(passwordFile, 'utf8')}@127.0.0.1:${at}/${database}`;
  if (run(user, 'pg_ctl', ['status', '-D', data]).code === 0) {
    // The fourth line of the lock file is the port that the running server listens on.
    const running = Number(readFileSync(join(data, 'postmaster.pid'), 'utf8').split('\n')[3]);
    return { url: urlOn(running), started: false, stop: () => {} };
  }

  const quick = throwaway ? ' -c fsync=off -c synchronous_commit=off -c full_page_writes=off' : '';
  const settings = `-p ${port} -c listen_addresses=127.0.0.1 -c unix_socket_directories= -c max_connections=200 -c shared_buffers=256MB${quick}`;
  const log = join(data, 'server.log');
  if (run(user, 'pg_ctl', ['start', '-D', data, '-w', '-t', '60', '-l', log, '-o', settings]).code !== 0) {
    throw new Error(`PostgreSQL did not start on port ${port}. Its last words:\n${existsSync(log) ? readFileSync(log, 'utf8').slice(-2000) : ''}`);
  }
  return { url: urlOn(port), started: true, stop: () => void run(user, 'pg_ctl', ['stop', '-D', data, '-m', 'fast', '-w']) };
}
