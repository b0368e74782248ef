import { stdout } from "node:process";

const FRAME_MS = 250;
const QUIET_MS = 1000;

const isTerminal = Boolean(stdout.isTTY) && !process.env.CI;

/** Steps that run now; several may run side by side. */
const running = new Set();
let timer;

/**
 * Runs a step and shows how long it takes: on a terminal as one line that counts the seconds, elsewhere as a line
 * at its start, whenever it says something new, and at its end. Steps shorter than a second stay silent.
 * `work` may `say` what it is at.
 */
export async function step(label, work) {
  const entry = { label, detail: "", startedAt: Date.now(), shown: null };
  running.add(entry);
  timer ??= setInterval(show, FRAME_MS);
  try {
    return await work((text) => {
      entry.detail = text;
    });
  } finally {
    running.delete(entry);
    if (entry.shown !== null) stdout.write(`${isTerminal ? "\r\x1b[2K" : ""}${label}: ${secondsOf(entry)} s\n`);
    if (running.size === 0) {
      clearInterval(timer);
      timer = undefined;
    }
  }
}

function secondsOf(entry) {
  return Math.round((Date.now() - entry.startedAt) / 1000);
}

function textOf({ label, detail }) {
  return detail ? `${label}: ${detail}` : label;
}

function show() {
  const due = [...running].filter((entry) => Date.now() - entry.startedAt >= QUIET_MS);
  if (due.length === 0) return;
  if (isTerminal) {
    const line = due.map((entry) => `${textOf(entry)} … ${secondsOf(entry)} s`).join("   ");
    stdout.write(`\r\x1b[2K${line.slice(0, (stdout.columns ?? 80) - 1)}`);
  }
  for (const entry of due) {
    if (!isTerminal && entry.shown !== entry.detail) stdout.write(`${textOf(entry)} …\n`);
    entry.shown = entry.detail;
  }
}
