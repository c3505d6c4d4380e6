import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('..', import.meta.url));
const alias = { '~': `${root}src` };

/** Pure checks: no database, no server. `tests/server` and `tests/http` have projects of their own. */
export default defineConfig({
  root,
  resolve: { alias },
  test: {
    projects: [
      {
        root,
        resolve: { alias },
        test: {
          name: 'pure',
          include: ['tests/unit/**/*.test.ts', 'tests/reference/**/*.test.ts', 'tests/architecture/**/*.test.ts', 'tests/fakes/**/*.test.ts'],
          environment: 'node',
        },
      },
    ],
  },
});
