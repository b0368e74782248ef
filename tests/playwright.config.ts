import { defineConfig, devices } from "@playwright/test";
import { CHROMIUM, CHROMIUM_FLAGS } from "../src/ops/setup/chromium.mjs";

export default defineConfig({
  testDir: "e2e",
  outputDir: ".results",
  globalSetup: "./support/servers.ts",
  workers: 1,
  fullyParallel: false,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  reporter: process.env.TAILMARK_RESULTS ? [["list"], ["json", { outputFile: process.env.TAILMARK_RESULTS }]] : [["list"]],
  use: {
    baseURL: process.env.E2E_URL,
    locale: "en-GB",
    // The city's people are elsewhere than the server: times must not follow the browser's zone.
    timezoneId: "Pacific/Auckland",
    trace: "retain-on-failure",
    screenshot: "only-on-failure",
    launchOptions: { executablePath: CHROMIUM, args: CHROMIUM_FLAGS },
  },
  projects: [
    { name: "desk", testIgnore: /\.phone\.spec\.ts$/, use: { viewport: { width: 1440, height: 900 } } },
    { name: "phone", testMatch: /\.phone\.spec\.ts$/, use: { ...devices["Pixel 7"] } },
  ],
});
