import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { afterAll, inject } from 'vitest';
import { localEnvironment } from '../../src/launch/local-env.mjs';
import { freePorts } from './ports.ts';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

// Each file gets a clone of the template, made before anything of `src/server` is imported, and ports for the stand-ins it may start
// (`PAYMENTS_URL`, `STORAGE_ENDPOINT`, `MAIL_URL` of this environment).
const template = inject('templateUrl');
const name = `skidway_file_${randomBytes(6).toString('hex')}`;
const admin = template.replace(/\/[^/]*$/, '/postgres');
const templateName = template.split('/').at(-1) ?? '';

async function asAdmin(sql: string): Promise<void> {
  const client = new pg.Client({ connectionString: admin });
  await client.connect();
  await client.query(sql);
  await client.end();
}

await asAdmin(`CREATE DATABASE ${name} TEMPLATE ${templateName}`);
const [payments, storage, smtp] = await freePorts(3);
const environment = localEnvironment({ base: 4321, databaseUrl: template.replace(/\/[^/]*$/, `/${name}`), dataFolder: join(tmpdir(), 'skidway-test') });
Object.assign(process.env, environment, {
  PAYMENTS_URL: `http://127.0.0.1:${payments}`,
  PAYMENTS_PAGE_ORIGIN: `http://localhost:${payments}`,
  STORAGE_ENDPOINT: `http://127.0.0.1:${storage}`,
  STORAGE_PUBLIC_ENDPOINT: `http://127.0.0.1:${storage}`,
  MAIL_URL: `smtp://127.0.0.1:${smtp}`,
  LOG_LEVEL: 'silent',
});

afterAll(async () => {
  const { sequelize } = await import('../../src/server/db.ts');
  const { closeLimits } = await import('../../src/server/http/limits.ts');
  await sequelize.close();
  await closeLimits();
  await asAdmin(`DROP DATABASE IF EXISTS ${name} WITH (FORCE)`);
});
