// Every address and key of a local run, in the same variables that a real one sets. `docker-free-dev.md` explains each.
import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';

/** A secret made once and kept beside the data. */
function keptSecret(file) {
  if (!existsSync(file)) {
    mkdirSync(dirname(file), { recursive: true });
    writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600 });
  }
  return readFileSync(file, 'utf8').trim();
}

/** The ports of a run: seven in a row. */
export const portsFrom = (base) => ({ web: base, payments: base + 1, storage: base + 2, mailPage: base + 3, smtp: base + 4, postgres: base + 5 });

/**
 * The environment of the local application.
 * @param {{ base: number, databaseUrl: string, dataFolder: string }} run
 */
export function localEnvironment({ base, databaseUrl, dataFolder }) {
  const ports = portsFrom(base);
  return {
    NODE_ENV: 'production',
    PORT: String(ports.web),
    HOST: '127.0.0.1',
    ORIGIN: `http://localhost:${ports.web}`,
    APP_SECRET: keptSecret(join(dataFolder, 'app-secret')),
    DATABASE_URL: databaseUrl,
    PAYMENTS_URL: `http://127.0.0.1:${ports.payments}`,
    PAYMENTS_PAGE_ORIGIN: `http://localhost:${ports.payments}`,
    PAYMENTS_SECRET_KEY: 'sk_test_local',
    PAYMENTS_WEBHOOK_SECRET: 'whsec_local',
    STORAGE_ENDPOINT: `http://127.0.0.1:${ports.storage}`,
    STORAGE_PUBLIC_ENDPOINT: `http://localhost:${ports.storage}`,
    STORAGE_REGION: 'us-east-1',
    STORAGE_BUCKET: 'skidway',
    STORAGE_ACCESS_KEY: 'local-access',
    STORAGE_SECRET_KEY: 'local-secret',
    MAIL_URL: `smtp://127.0.0.1:${ports.smtp}`,
    MAIL_FROM: 'Skidway <post@skidway.example>',
    FEE_BASIS_POINTS: '500',
    LOG_LEVEL: 'warn',
    // The storage client is pinned to the last line that runs on Node 20; it would say so at every start.
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true',
  };
}
