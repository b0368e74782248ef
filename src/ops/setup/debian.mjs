import { existsSync } from "node:fs";
import { run } from "./run.mjs";

/** Packages of the system are installed by root only, and never against the person's will. */
export function mayInstall() {
  return process.getuid?.() === 0 && existsSync("/usr/bin/apt-get") && process.env.TAILMARK_NO_INSTALL !== "1";
}

/** Installs the first of the alternatives that Debian has; updates the package lists once if none is known. */
export async function aptInstall(alternatives) {
  const install = async () => {
    let failure;
    for (const name of alternatives) {
      try {
        await run("apt-get", ["install", "-y", "--no-install-recommends", name], { env: { DEBIAN_FRONTEND: "noninteractive" } });
        return;
      } catch (error) {
        failure = error;
      }
    }
    throw failure;
  };
  try {
    await install();
  } catch {
    await run("apt-get", ["update"]);
    await install();
  }
}
