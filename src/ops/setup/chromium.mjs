import { existsSync } from "node:fs";
import { aptInstall, mayInstall } from "./debian.mjs";
import { step } from "./progress.mjs";
import { SetupError } from "./run.mjs";

/** Debian's. */
export const CHROMIUM = "/usr/bin/chromium";

/** WebGL by software, and nothing that phones home. */
export const CHROMIUM_FLAGS = [
  "--no-sandbox",
  "--enable-unsafe-swiftshader",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
  "--disable-dev-shm-usage",
];

export async function ensureChromium() {
  if (existsSync(CHROMIUM)) return;
  if (!mayInstall()) throw new SetupError('Chromium is missing: install it as root with "apt-get install chromium".');
  await step("Installing Chromium", () => aptInstall(["chromium"]));
}
