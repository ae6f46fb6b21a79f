import { defineConfig } from '@playwright/test';

/** Debian's Chromium; `npm run verify` finds or installs it. Nothing is downloaded. */
const executablePath = process.env.CHROMIUM ?? '/usr/bin/chromium';

export default defineConfig({
  testDir: '.',
  testMatch: '*.spec.ts',
  outputDir: '../../test-results',
  // One arm, one machine of two cores: tests follow each other.
  workers: 1,
  fullyParallel: false,
  timeout: 120_000,
  expect: { timeout: 10_000 },
  forbidOnly: true,
  reporter: [['list'], ['./plain-reporter.ts']],
  use: {
    viewport: { width: 1440, height: 900 },
    launchOptions: {
      executablePath,
      args: [
        '--no-sandbox',
        '--disable-quic',
        '--no-first-run',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
      ],
    },
    screenshot: 'only-on-failure',
    trace: 'off',
  },
});
