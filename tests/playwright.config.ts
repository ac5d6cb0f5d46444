import { fileURLToPath } from 'node:url';
import { defineConfig } from '@playwright/test';

const results = fileURLToPath(new URL('../.local/test-results', import.meta.url));

/** Debian's browser: Playwright's own is not downloaded. */
const chromium = {
  executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
  args: [
    '--headless',
    '--no-sandbox',
    '--disable-gpu',
    '--disable-quic',
    '--no-first-run',
    '--disable-background-networking',
    '--disable-component-update',
    '--disable-sync',
  ],
};

export default defineConfig({
  testDir: './e2e',
  outputDir: `${results}/playwright`,
  globalSetup: fileURLToPath(new URL('../packages/local-stack/src/playwright-stack.ts', import.meta.url)),
  // All tests share one database and one board.
  workers: 1,
  fullyParallel: false,
  retries: 0,
  // Generous: a machine that does other work is slow, not wrong.
  timeout: 180_000,
  expect: { timeout: 25_000 },
  reporter: [['list']],
  use: {
    baseURL: process.env.E2E_WEB_URL,
    // The viewer's zone; sites are elsewhere, and the servers in a third.
    timezoneId: 'America/New_York',
    locale: 'en-US',
    viewport: { width: 1440, height: 900 },
    launchOptions: chromium,
    screenshot: 'only-on-failure',
    trace: 'retain-on-failure',
  },
});
