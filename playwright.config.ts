import { existsSync } from 'node:fs';
import { defineConfig } from '@playwright/test';

const port = Number(process.env.E2E_PORT ?? 4199);
const origin = `http://127.0.0.1:${port}`;
const chromium = process.env.CHROMIUM_PATH || '/usr/bin/chromium';

export default defineConfig({
  testDir: 'tests/e2e',
  outputDir: 'test-results',
  // Generous, because a build machine shares its two cores; nothing waits longer than it has to.
  timeout: 120_000,
  expect: { timeout: 30_000 },
  workers: 2,
  fullyParallel: true,
  retries: 0,
  forbidOnly: true,
  reporter: 'list',
  use: {
    baseURL: origin,
    locale: 'en-GB',
    timezoneId: 'UTC',
    viewport: { width: 1440, height: 900 },
    screenshot: 'only-on-failure',
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: existsSync(chromium) ? chromium : undefined,
      args: [
        '--headless',
        '--no-sandbox',
        '--disable-gpu',
        '--disable-quic',
        '--no-first-run',
        // The browser's own background traffic has no place in a test that watches every request.
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync'
      ]
    }
  },
  projects: [
    { name: 'people', testIgnore: '**/outage.spec.ts' },
    // Takes the database away from everybody, so it waits until everybody has gone.
    { name: 'outage', testMatch: '**/outage.spec.ts', dependencies: ['people'], fullyParallel: false }
  ],
  webServer: {
    command: 'node scripts/e2e-server.mjs',
    url: `${origin}/health/ready`,
    reuseExistingServer: false,
    timeout: 240_000,
    stdout: 'pipe',
    gracefulShutdown: { signal: 'SIGTERM', timeout: 20_000 }
  }
});
