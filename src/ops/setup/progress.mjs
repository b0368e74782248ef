import { stdout } from "node:process";

const FRAME_MS = 250;
const QUIET_MS = 1000;

/**
 * Runs a step and shows how long it takes: on a terminal as one line that counts the seconds, elsewhere as a line
 * at its start and one at its end. Steps shorter than a second stay silent. `work` may `say` what it is at.
 */
export async function step(label, work) {
  const startedAt = Date.now();
  const isTerminal = Boolean(stdout.isTTY) && !process.env.CI;
  let detail = "";
  let announced = false;
  let lastShown = "";

  const seconds = () => Math.round((Date.now() - startedAt) / 1000);
  const show = () => {
    if (Date.now() - startedAt < QUIET_MS) return;
    const line = detail ? `${label}: ${detail}` : label;
    if (isTerminal) {
      const text = `${line} … ${seconds()} s`;
      stdout.write(`\r\x1b[2K${text.slice(0, (stdout.columns ?? 80) - 1)}`);
    } else if (!announced || (detail && detail !== lastShown)) {
      stdout.write(`${line} …\n`);
      lastShown = detail;
    }
    announced = true;
  };

  const timer = setInterval(show, FRAME_MS);
  try {
    return await work((text) => {
      detail = text;
    });
  } finally {
    clearInterval(timer);
    if (announced) stdout.write(`${isTerminal ? "\r\x1b[2K" : ""}${label}: ${seconds()} s\n`);
  }
}
