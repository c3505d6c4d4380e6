import { parseArgs } from 'node:util';
import { LOCAL_CREDENTIALS, startFakeS3 } from './server.ts';

/**
 * Object storage for development: `tsx fakes/s3/main.ts --data DIR [--port 4331] [--bucket NAME]... [--origin URL]...`
 * Keys and region may be given by `--access-key`, `--secret-key` and `--region`.
 */
const { values } = parseArgs({
  options: {
    data: { type: 'string' },
    port: { type: 'string', default: '4331' },
    bucket: { type: 'string', multiple: true, default: [] },
    origin: { type: 'string', multiple: true, default: [] },
    region: { type: 'string', default: 'us-east-1' },
    'access-key': { type: 'string', default: LOCAL_CREDENTIALS.accessKeyId },
    'secret-key': { type: 'string', default: LOCAL_CREDENTIALS.secretAccessKey },
  },
});

if (values.data === undefined) {
  console.error('Say where to keep the objects: --data DIR');
  process.exit(2);
}

const storage = await startFakeS3({
  dataDir: values.data,
  port: Number(values.port),
  region: values.region,
  credentials: [{ accessKeyId: values['access-key'], secretAccessKey: values['secret-key'] }],
  buckets: values.bucket,
  allowedOrigins: values.origin,
});
console.log(`storage: ${storage.url} (path-style, every bucket private), objects in ${values.data}`);

const stop = (): void => void storage.close().then(() => process.exit(0));
process.once('SIGINT', stop);
process.once('SIGTERM', stop);
