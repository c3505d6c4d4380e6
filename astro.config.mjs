import { defineConfig } from 'astro/config';
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwind from '@astrojs/tailwind';
import { loadEnv } from 'vite';
import { serverOnly } from './src/launch/server-only.mjs';

// Astro does not put `.env` into process.env while it reads this file.
const env = { ...loadEnv('production', process.cwd(), ''), ...process.env };
const base = Number(env.SKIDWAY_PORT_BASE ?? 4321);

/** Space-separated origins from the environment, or the loopback addresses of the program that stands in for the service. */
const origins = (name, port) => env[name] ?? `http://localhost:${port} http://127.0.0.1:${port}`;
const payments = origins('PAYMENTS_PAGE_ORIGIN', base + 1);
const storage = origins('STORAGE_PUBLIC_ORIGIN', base + 2);
const site = env.PUBLIC_ORIGIN ?? `http://localhost:${base}`;

export default defineConfig({
  site,
  output: 'server',
  // Behind our own HTTP front (src/launch): it caps bodies, checks Host and Origin and strips forwarded headers.
  adapter: node({ mode: 'middleware' }),
  integrations: [react(), tailwind({ applyBaseStyles: false })],
  server: { port: base, host: '127.0.0.1' },
  trailingSlash: 'ignore',
  devToolbar: { enabled: false },
  build: { inlineStylesheets: 'never' },
  security: {
    // Our front checks Origin and Sec-Fetch-Site on every unsafe method, JSON included; Astro's check covers forms only
    // and answers 403 to a correct form when it cannot see the public host.
    checkOrigin: false,
    allowedDomains: [{ hostname: new URL(site).hostname }, { hostname: 'localhost' }, { hostname: '127.0.0.1' }],
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
        "frame-ancestors 'none'",
        // A form that starts a payment is redirected to the provider's page, which the browser counts as a form target.
        `form-action 'self' ${payments} ${storage}`,
      ],
    },
  },
  vite: {
    plugins: [serverOnly()],
    // An inlined asset is a data: address, which font-src and script-src refuse.
    build: { assetsInlineLimit: 0 },
  },
});
