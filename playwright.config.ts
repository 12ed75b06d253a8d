import { defineConfig } from '@playwright/test';

const executablePath = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium';
const args = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

export default defineConfig({
  testDir: 'tests/e2e',
  globalSetup: './tests/e2e/support/globalSetup.ts',
  outputDir: 'test-results',
  workers: 1,
  forbidOnly: true,
  retries: 0,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  use: {
    browserName: 'chromium',
    launchOptions: { executablePath, args },
    locale: 'en-US',
    actionTimeout: 15_000,
    trace: 'retain-on-failure',
    screenshot: 'only-on-failure',
  },
  projects: [
    { name: 'phone', use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true } },
    { name: 'desktop', use: { viewport: { width: 1440, height: 900 } } },
  ],
});
