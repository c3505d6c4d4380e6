import { parseArgs } from 'node:util';
import { startFakeMail } from './server.ts';

/** Mail for development: `tsx fakes/mail/main.ts --data DIR [--smtp-port 4332] [--port 4333]` */
const { values } = parseArgs({
  options: {
    data: { type: 'string' },
    'smtp-port': { type: 'string', default: '4332' },
    port: { type: 'string', default: '4333' },
  },
});

if (values.data === undefined) {
  console.error('Say where to keep the messages: --data DIR');
  process.exit(2);
}

const mail = await startFakeMail({ dataDir: values.data, smtpPort: Number(values['smtp-port']), webPort: Number(values.port) });
console.log(`mail: ${mail.smtpUrl}, mailbox at ${mail.webUrl}, messages in ${values.data}`);

const stop = (): void => void mail.close().then(() => process.exit(0));
process.once('SIGINT', stop);
process.once('SIGTERM', stop);
