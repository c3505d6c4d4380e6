import { defineConfig } from '@playwright/test';

const quiet = ['--no-sandbox', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'];

/** Whole journeys in Debian's Chromium against the built product, started once on free ports. No retries: a flake is a fault. */
export default defineConfig({
  testDir: '.',
  outputDir: '../../.data/test/e2e-results',
  globalSetup: './support/start-product.ts',
  fullyParallel: false,
  workers: 2,
  retries: 0,
  timeout: 240_000,
  expect: { timeout: 20_000 },
  reporter: process.env['PLAYWRIGHT_JSON_OUTPUT_NAME'] ? [['list'], ['json']] : [['list']],
  use: {
    browserName: 'chromium',
    viewport: { width: 1280, height: 900 },
    locale: 'en-US',
    timezoneId: 'America/Chicago',
    trace: 'off',
    launchOptions: { executablePath: '/usr/bin/chromium', args: quiet },
  },
  projects: [
    { name: 'pages', testIgnore: ['**/map.spec.ts'] },
    // Only maps need WebGL; drawing every page by it in software takes half as long again.
    { name: 'maps', testMatch: '**/map.spec.ts', use: { launchOptions: { executablePath: '/usr/bin/chromium', args: [...quiet, '--use-gl=angle', '--use-angle=swiftshader', '--enable-unsafe-swiftshader', '--ignore-gpu-blocklist'] } } },
  ],
});
