import { fileURLToPath } from 'node:url';

/**
 * Vite plugin: our HTTP front (`src/server/http/main.ts`) becomes `dist/server/front.mjs` beside Astro's handler, sharing its modules.
 * So the web process is plain JavaScript: under a TypeScript loader every dynamic import of a request waits for another thread.
 * @returns {import('vite').Plugin}
 */
export function frontEntry() {
  let server = false;
  return {
    name: 'skidway:front-entry',
    apply: 'build',
    configResolved: (config) => void (server = Boolean(config.build.ssr)),
    buildStart() {
      if (server) this.emitFile({ type: 'chunk', id: fileURLToPath(new URL('../server/http/main.ts', import.meta.url)), fileName: 'front.mjs' });
    },
  };
}
