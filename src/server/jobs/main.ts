import { log } from '../log.ts';
import { startWorker } from './worker.ts';

const stop = await startWorker();
log().info('worker ready');
process.send?.('ready');
for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => void stop().then(() => process.exit(0)));
}
