import { defineConfig } from 'astro/config';
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwind from '@astrojs/tailwind';
import pwa from '@vite-pwa/astro';
import { frontEntry } from './src/launch/front-entry.mjs';
import { serverOnly } from './src/launch/server-only.mjs';
import { shellFiles } from './src/launch/shell-files.mjs';

// One build runs anywhere: these two stand for the payment page's and the storage's origins, which the middleware puts into
// the policy from the environment of the running server.
const payments = 'https://payments.skidway.invalid';
const storage = 'https://storage.skidway.invalid';

// Pages that open without signal. They are made at build time and hold nobody's data.
const shells = ['day/index.html', 'estimator/index.html'];
const clientFolder = new URL('./dist/client/', import.meta.url).pathname;

const offline = pwa({
  strategies: 'injectManifest',
  srcDir: 'src/islands/day',
  filename: 'service-worker.ts',
  // The manifest is a file of ours, and the page registers the worker by a script of its own.
  manifest: false,
  injectRegister: null,
  injectManifest: {
    globPatterns: ['{day,estimator}/index.html', '_astro/*.{js,css,woff2,svg}', 'icon-192.png', 'favicon.svg', 'manifest.webmanifest'],
    maximumFileSizeToCacheInBytes: 4_000_000,
    manifestTransforms: [
      async (entries) => {
        const needed = shellFiles(clientFolder, shells);
        const kept = entries.filter(({ url }) => needed.has(url) || !/^_astro\//.test(url));
        return { manifest: kept.map((entry) => ({ ...entry, url: `/${entry.url.replace(/\/index\.html$/, '')}` })), warnings: [] };
      },
    ],
  },
});

export default defineConfig({
  output: 'server',
  // Behind our own HTTP front (src/server/http): it caps bodies, checks Host and Origin and strips forwarded headers.
  adapter: node({ mode: 'middleware' }),
  integrations: [react(), tailwind({ applyBaseStyles: false }), offline],
  trailingSlash: 'ignore',
  devToolbar: { enabled: false },
  build: { inlineStylesheets: 'never' },
  security: {
    // Our front checks Origin and Sec-Fetch-Site on every unsafe method, JSON included; Astro's check covers forms only
    // and answers 403 to a correct form when it cannot see the public host.
    checkOrigin: false,
    // Our front has compared Host with our origin before Astro sees the request.
    allowedDomains: [{}],
  },
  experimental: {
    // Scripts and styles: 'self' and the hashes Astro computes; never 'unsafe-inline'. So no `style=` and no `on…=` attributes.
    csp: {
      directives: [
        "default-src 'self'",
        `img-src 'self' data: blob: ${storage}`,
        "font-src 'self'",
        `connect-src 'self' ${storage}`,
        "worker-src 'self'",
        "manifest-src 'self'",
        "object-src 'none'",
        "base-uri 'self'",
        // A form that starts a payment is redirected to the provider's page, which the browser counts as a form target.
        `form-action 'self' ${payments} ${storage}`,
      ],
    },
  },
  vite: {
    plugins: [serverOnly(), frontEntry()],
    // A thread of the browser is a bundle of its own, under the same rule; it does not read the paths of tsconfig.json.
    resolve: { alias: { '~': new URL('./src', import.meta.url).pathname } },
    worker: { format: 'es', plugins: () => [serverOnly()] },
    // An inlined asset is a data: address, which font-src and script-src refuse.
    build: { assetsInlineLimit: 0 },
  },
});
