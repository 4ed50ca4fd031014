import { defineConfig } from '@playwright/test'

/** Walks through the built application in Debian's Chromium. `*.phone.spec.ts` and `*.desktop.spec.ts` run in that size alone, others in both. */
export default defineConfig({
  testDir: 'tests/e2e',
  globalSetup: './tests/e2e/global-setup.ts',
  outputDir: 'test-results/e2e',
  // Each worker has a whole school of its own: database, storage, mail, web and worker process. Two cores bear one.
  workers: 1,
  retries: 0,
  timeout: 60_000,
  expect: { timeout: 10_000 },
  forbidOnly: true,
  use: {
    browserName: 'chromium',
    launchOptions: {
      executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
      args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--disable-dev-shm-usage'],
    },
    locale: 'en-GB',
    trace: 'retain-on-failure',
    screenshot: 'only-on-failure',
  },
  projects: [
    { name: 'phone', testIgnore: /\.desktop\.spec\.ts$/, use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true, deviceScaleFactor: 2 } },
    { name: 'desktop', testIgnore: /\.phone\.spec\.ts$/, use: { viewport: { width: 1320, height: 900 } } },
  ],
})
