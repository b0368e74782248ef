import { createServer } from "node:net";
import { SetupError } from "./run.mjs";

const TRIES = 50;

function isFree(port, host) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once("error", () => resolve(null));
    probe.listen(port, host, () => {
      const { port: taken } = probe.address();
      probe.close(() => resolve(taken));
    });
  });
}

/** Any free port on loopback. */
export async function anyFreePort() {
  return isFree(0, "127.0.0.1");
}

/** The wanted port, or the next one above it that is free. */
export async function freePortFrom(wanted, host = "127.0.0.1") {
  for (let port = wanted; port < wanted + TRIES && port < 65_536; port++) {
    if ((await isFree(port, host)) !== null) return port;
  }
  throw new SetupError(`No port between ${wanted} and ${wanted + TRIES - 1} is free on ${host}. Name another one with PORT.`);
}
