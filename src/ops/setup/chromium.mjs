import { existsSync } from "node:fs";
import { aptInstall, mayInstall } from "./debian.mjs";
import { step } from "./progress.mjs";
import { SetupError } from "./run.mjs";

export async function ensureChromium() {
  if (existsSync("/usr/bin/chromium")) return;
  if (!mayInstall()) throw new SetupError('Chromium is missing: install it as root with "apt-get install chromium".');
  await step("Installing Chromium", () => aptInstall(["chromium"]));
}
