// Starts the parts of the product as child processes and stops exactly those.
import { spawn } from 'node:child_process';
import { connect } from 'node:net';
import { join } from 'node:path';
import { root } from './setup.mjs';

/** Resolves once something listens on the port; rejects after `seconds`. */
export async function portAnswers(port, seconds = 40) {
  const until = Date.now() + seconds * 1000;
  for (;;) {
    const open = await new Promise((resolve) => {
      const socket = connect({ port, host: '127.0.0.1' });
      socket.once('connect', () => (socket.destroy(), resolve(true)));
      socket.once('error', () => resolve(false));
    });
    if (open) return;
    if (Date.now() > until) throw new Error(`Nothing answered on port ${port} within ${seconds} seconds.`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

/**
 * A group of child processes that live and stop together.
 * @param {(name: string, code: number | null) => void} onDeath called when one ends without being asked to
 */
export function processGroup(onDeath) {
  const children = new Map();
  let stopping = false;

  /** Runs a TypeScript or JavaScript file of ours under its own name. */
  function start(name, file, args, env) {
    const child = spawn(process.execPath, [...(file.endsWith('.ts') ? ['--import', 'tsx'] : []), join(root, file), ...args], {
      cwd: root,
      env: { ...process.env, ...env },
      stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
      // A Ctrl-C in the terminal reaches only us; we then stop the others in order.
      detached: true,
    });
    children.set(name, child);
    const ready = new Promise((resolve, reject) => {
      child.once('message', resolve);
      child.once('exit', (code) => reject(new Error(`${name} ended before it was ready (exit code ${code})`)));
    });
    ready.catch(() => {});
    child.once('exit', (code) => {
      children.delete(name);
      if (!stopping) onDeath(name, code);
    });
    return { child, ready };
  }

  /** Asks every child to stop, and makes those that do not within ten seconds. */
  async function stop() {
    stopping = true;
    await Promise.all([...children.values()].reverse().map((child) => new Promise((resolve) => {
      const force = setTimeout(() => child.kill('SIGKILL'), 10_000);
      child.once('exit', () => (clearTimeout(force), resolve()));
      child.kill('SIGTERM');
    })));
  }

  return { start, stop };
}

/** Starts the three stand-ins of the outside services and waits until they listen. */
export async function startFakes(group, env, ports, dataFolder) {
  const url = `http://127.0.0.1:${ports.web}`;
  group.start('payments stand-in', 'fakes/stripe/main.ts', ['--port', ports.payments, '--data', join(dataFolder, 'stripe'), '--key', env.PAYMENTS_SECRET_KEY, '--webhook-url', `${url}/api/webhooks/payments`, '--webhook-secret', env.PAYMENTS_WEBHOOK_SECRET, '--page-origin', env.PAYMENTS_PAGE_ORIGIN].map(String), {});
  group.start('storage stand-in', 'fakes/s3/main.ts', ['--port', ports.storage, '--data', join(dataFolder, 's3'), '--access-key', env.STORAGE_ACCESS_KEY, '--secret-key', env.STORAGE_SECRET_KEY, '--bucket', env.STORAGE_BUCKET, '--origin', env.ORIGIN].map(String), {});
  group.start('mail stand-in', 'fakes/mail/main.ts', ['--smtp-port', ports.smtp, '--port', ports.mailPage, '--data', join(dataFolder, 'mail')].map(String), {});
  await Promise.all([ports.payments, ports.storage, ports.mailPage, ports.smtp].map((port) => portAnswers(port)));
}
