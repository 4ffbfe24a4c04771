import { defineConfig, devices } from "@playwright/test";

const { E2E_BASE_URL, E2E_CHROMIUM, E2E_REPORT } = process.env;
const asRoot = process.getuid?.() === 0;

/** The build, its database, worker, storage and mail folders are made by `npm test`; see docker-less-setup/run-tests.mjs. */
export default defineConfig({
  testDir: ".",
  globalSetup: "./demand-product.ts",
  outputDir: "../../test-results",
  forbidOnly: true,
  retries: 0,
  workers: 2,
  timeout: 60_000,
  expect: { timeout: 10_000 },
  reporter: [["list"], ...(E2E_REPORT ? ([["json", { outputFile: E2E_REPORT }]] as const) : [])],
  use: {
    ...devices["Desktop Chrome"],
    ...(E2E_BASE_URL ? { baseURL: E2E_BASE_URL } : {}),
    viewport: { width: 1280, height: 900 },
    actionTimeout: 15_000,
    navigationTimeout: 30_000,
    locale: "en-GB",
    timezoneId: "UTC",
    trace: "retain-on-failure",
    screenshot: "only-on-failure",
    launchOptions: {
      executablePath: E2E_CHROMIUM ?? "/usr/bin/chromium",
      // Chromium's own sandbox refuses to start as root.
      args: asRoot ? ["--no-sandbox"] : [],
    },
  },
});
