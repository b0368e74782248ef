/**
 * `npm test`: sets itself up, then lint, types, unit, database and browser tests, and a summary.
 * Plain Node: it runs before any package is installed. Words after `npm test --` choose parts: lint types unit db build e2e.
 */
import { spawn } from "node:child_process";
import { mkdirSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { ensureWebBuild } from "./setup/build.mjs";
import { ensureChromium } from "./setup/chromium.mjs";
import { ensurePackages } from "./setup/packages.mjs";
import { ensurePostgres } from "./setup/postgres-binaries.mjs";
import { SetupError } from "./setup/run.mjs";

const root = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");
const results = join(root, ".data/test");
const modules = join(root, "node_modules");

/** A log in a file is read without colours. */
const PLAIN = process.stdout.isTTY ? {} : { NO_COLOR: "1", FORCE_COLOR: undefined };

/** Runs a Node program with its output shown; answers its exit code. A signal to us ends it too. */
function show(program, args, env = {}) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, [join(modules, program), ...args], { cwd: root, stdio: ["ignore", "inherit", "inherit"], env: { ...process.env, ...PLAIN, ...env } });
    child.on("close", (code, signal) => resolve(signal ? 1 : code));
  });
}

/** A part that either holds or not counts as one. */
async function check(program, args) {
  const code = await show(program, args);
  return { passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1 };
}

function readJson(path) {
  try {
    return JSON.parse(readFileSync(path, "utf8"));
  } catch {
    return null;
  }
}

/** A runner that fails without a failed test (nothing ran, a file that cannot be read) counts as one failure. */
function tally(code, passed, failed) {
  return { passed, failed: code !== 0 && failed === 0 ? 1 : failed };
}

async function vitest(project) {
  const file = join(results, `${project}.json`);
  const args = ["run", "-c", "tests/vitest.config.ts", "--project", project, "--reporter=dot", "--reporter=json", `--outputFile.json=${file}`];
  const code = await show("vitest/vitest.mjs", args);
  const report = readJson(file);
  return tally(code, report?.numPassedTests ?? 0, report?.numFailedTests ?? 0);
}

async function browser() {
  const file = join(results, "e2e.json");
  const code = await show("@playwright/test/cli.js", ["test", "-c", "tests/playwright.config.ts"], { TAILMARK_RESULTS: file });
  const stats = readJson(file)?.stats;
  return tally(code, stats?.expected ?? 0, (stats?.unexpected ?? 0) + (stats?.flaky ?? 0));
}

async function types() {
  // What a development server left there tells of the routes as they were then.
  rmSync(join(root, ".next/dev/types"), { recursive: true, force: true });
  const generated = await show("next/dist/bin/next", ["typegen"]);
  if (generated !== 0) return { passed: 0, failed: 1 };
  return check("typescript/bin/tsc", ["--noEmit"]);
}

async function build() {
  await ensureWebBuild(root);
  return { passed: 1, failed: 0 };
}

const PARTS = {
  lint: () => check("eslint/bin/eslint.js", ["-c", ".ci/eslint.config.mjs", "--max-warnings", "0", "src", "tests", "seed"]),
  types,
  unit: () => vitest("unit"),
  db: () => vitest("db"),
  build,
  e2e: browser,
};

async function runPart(name) {
  const startedAt = Date.now();
  console.log(`\n== ${name}`);
  let outcome;
  try {
    outcome = await PARTS[name]();
  } catch (error) {
    console.error(error instanceof SetupError ? error.message : error);
    outcome = { passed: 0, failed: 1 };
  }
  return { name, ...outcome, seconds: Math.round((Date.now() - startedAt) / 1000) };
}

async function main() {
  const wanted = process.argv.slice(2);
  const unknown = wanted.filter((name) => !(name in PARTS));
  if (unknown.length > 0) throw new SetupError(`No such part: ${unknown.join(", ")}. Parts are ${Object.keys(PARTS).join(", ")}.`);
  const names = wanted.length > 0 ? wanted : Object.keys(PARTS);

  await ensurePackages(root);
  if (names.includes("db") || names.includes("e2e")) await ensurePostgres();
  if (names.includes("e2e")) await ensureChromium();
  rmSync(results, { recursive: true, force: true });
  mkdirSync(results, { recursive: true });

  const outcomes = [];
  for (const name of names) outcomes.push(await runPart(name));

  console.log("\npart    passed  failed  seconds");
  for (const { name, passed, failed, seconds } of outcomes) {
    console.log(`${name.padEnd(6)}${String(passed).padStart(8)}${String(failed).padStart(8)}${String(seconds).padStart(9)}`);
  }
  const total = (key) => outcomes.reduce((sum, outcome) => sum + outcome[key], 0);
  console.log(`\nTests: ${total("passed")} passed, ${total("failed")} failed`);
  process.exitCode = total("failed") > 0 || total("passed") === 0 ? 1 : 0;
}

main().catch((error) => {
  console.error(error instanceof SetupError ? error.message : error);
  process.exitCode = 1;
});
