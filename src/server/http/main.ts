import { fileURLToPath } from 'node:url';
import { env } from '../env.ts';
import { log } from '../log.ts';
import { createFront, type Handler } from './front.ts';
import { warmUp } from './warm-up.ts';

// Built into `dist/server/front.mjs`, beside Astro's handler: only together do they make the web process.
const settings = env();
const { handler } = (await import(/* @vite-ignore */ new URL('./entry.mjs', import.meta.url).href)) as { handler: Handler };

const server = createFront(handler, fileURLToPath(new URL('../client', import.meta.url)), settings);
server.requestTimeout = 30_000;
server.headersTimeout = 10_000;
server.keepAliveTimeout = 5_000;
server.listen(settings.PORT, settings.HOST, () => {
  void warmUp(settings).then(() => {
    log().info({ port: settings.PORT }, 'web ready');
    process.send?.('ready');
  });
});

let stopping = false;
for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.on(signal, () => {
    if (stopping) return;
    stopping = true;
    // Requests in hand are answered; idle connections are closed; nobody waits longer than ten seconds.
    server.close(() => process.exit(0));
    server.closeIdleConnections();
    setTimeout(() => process.exit(0), 10_000).unref();
  });
}
