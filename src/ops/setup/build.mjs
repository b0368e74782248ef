import { createHash } from "node:crypto";
import { copyFileSync, existsSync, mkdirSync, readFileSync, readdirSync, writeFileSync } from "node:fs";
import { join, relative } from "node:path";
import { step } from "./progress.mjs";
import { run } from "./run.mjs";

const SOURCES = ["src", "public", "package-lock.json", "next.config.mjs", "tailwind.config.ts", "postcss.config.mjs", "tsconfig.json"];
const MAP_WORKER = "maplibre-gl-worker.mjs";

function* filesUnder(path) {
  if (!existsSync(path)) return;
  const entries = readdirSync(path, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1));
  for (const entry of entries) {
    const child = join(path, entry.name);
    if (entry.isDirectory()) yield* filesUnder(child);
    else if (entry.name !== MAP_WORKER) yield child;
  }
}

/** Changes with every source that the web build depends on. */
function sourceHash(root) {
  const hash = createHash("sha256");
  for (const source of SOURCES) {
    const path = join(root, source);
    const files = /\.[a-z]+$/.test(source) ? [path] : [...filesUnder(path)];
    for (const file of files) hash.update(relative(root, file)).update("\0").update(readFileSync(file)).update("\0");
  }
  return hash.digest("hex");
}

/** The map library runs a worker that the browser loads by an address of ours. */
export function placeMapWorker(root) {
  copyFileSync(join(root, "node_modules/maplibre-gl/dist", MAP_WORKER), join(root, "public", MAP_WORKER));
}

export async function ensureWebBuild(root) {
  placeMapWorker(root);
  const stamp = join(root, ".next/tailmark-sources");
  const hash = sourceHash(root);
  const isFresh = existsSync(join(root, ".next/BUILD_ID")) && existsSync(stamp) && readFileSync(stamp, "utf8") === hash;
  if (isFresh) return;
  await step("Building the pages", () =>
    run(process.execPath, [join(root, "node_modules/next/dist/bin/next"), "build"], { what: "The build", cwd: root, env: { NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1" } }),
  );
  writeFileSync(stamp, hash);
}

/** Worker and preparation as plain JavaScript: they start at once and run without wrappers in hot loops. */
export async function bundlePrograms(root) {
  const { build } = await import("esbuild");
  const outdir = join(root, ".data/build");
  mkdirSync(outdir, { recursive: true });
  await build({
    absWorkingDir: root,
    entryPoints: { worker: "src/worker/main.ts", prepare: "src/ops/prepare.ts" },
    outdir,
    outExtension: { ".js": ".mjs" },
    bundle: true,
    platform: "node",
    target: "node20",
    format: "esm",
    packages: "external",
    sourcemap: true,
    logLevel: "warning",
  });
  return { worker: join(outdir, "worker.mjs"), prepare: join(outdir, "prepare.mjs") };
}
