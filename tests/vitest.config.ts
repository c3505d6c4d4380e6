import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('..', import.meta.url));
const resolve = { alias: { '~': `${root}src` } };

/**
 * Three kinds of check: `pure` needs nothing; `server` runs each file against a database of its own, cloned from a migrated
 * template; `http` talks to the built server with the stand-ins beside it.
 */
export default defineConfig({
  root,
  resolve,
  test: {
    projects: [
      {
        root,
        resolve,
        test: { name: 'pure', include: ['tests/{unit,reference,architecture,fakes}/**/*.test.ts'], testTimeout: 20_000, benchmark: { include: ['tests/bench/**/*.bench.ts'] } },
      },
      {
        root,
        resolve,
        test: {
          name: 'server',
          include: ['tests/server/**/*.test.ts'],
          globalSetup: ['tests/support/template-database.ts'],
          setupFiles: ['tests/support/own-database.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        root,
        resolve,
        test: { name: 'http', include: ['tests/http/**/*.test.ts'], globalSetup: ['tests/support/running-product.ts'], testTimeout: 30_000, hookTimeout: 60_000, fileParallelism: false },
      },
    ],
    maxWorkers: 2,
  },
});
