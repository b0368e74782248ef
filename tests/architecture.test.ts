import { readFileSync, readdirSync } from "node:fs";
import { join, relative } from "node:path";
import { describe, expect, it } from "vitest";

const ROOT = join(import.meta.dirname, "..");

/** Layers that a layer may import at run time; itself is understood. `import type` may cross every boundary except out of core. */
const MAY_IMPORT: Record<string, readonly string[]> = {
  core: [],
  domain: ["core"],
  geo: ["core", "domain"],
  formats: ["core", "domain", "geo"],
  db: ["core", "domain", "env"],
  storage: ["domain", "env"],
  mail: ["domain", "env"],
  jobs: ["domain", "db"],
  services: ["core", "domain", "geo", "formats", "db", "storage", "jobs"],
  worker: ["core", "domain", "db", "jobs", "services", "storage", "mail", "env"],
  server: ["domain", "db", "jobs", "services", "storage", "mail", "env"],
  ui: ["core", "domain", "geo"],
  app: ["core", "domain", "geo", "services", "server", "ui"],
  seed: ["core", "domain", "geo", "formats"],
  ops: ["core", "domain", "geo", "formats", "db", "storage", "mail", "jobs", "services", "worker", "seed", "env"],
  env: [],
  proxy: [],
  instrumentation: ["server"],
};

/** npm packages of the layers that are kept free of them, or nearly. */
const MAY_USE: Record<string, readonly string[]> = {
  core: [],
  domain: ["zod"],
};

/** Packages that belong to certain layers alone. */
const BELONGS_TO: Record<string, readonly string[]> = {
  "drizzle-orm": ["db", "services", "jobs", "ops"],
  pg: ["db", "services", "worker", "ops"],
  "pg-boss": ["jobs", "worker"],
  next: ["app", "server", "ui", "proxy"],
  "next-auth": ["app", "server", "ui"],
  react: ["app", "server", "ui"],
  "maplibre-gl": ["ui"],
  "react-map-gl": ["ui"],
};

const LINE_LIMIT = 300;
/** Files that may be longer, each with the reason. */
const LONGER: Record<string, string> = {};

interface SourceFile {
  path: string;
  layer: string;
  text: string;
}

function sourcesUnder(folder: string): string[] {
  return readdirSync(join(ROOT, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.(ts|tsx|mjs)$/.test(entry.name))
    .map((entry) => relative(ROOT, join(entry.parentPath, entry.name)));
}

function layerOf(path: string): string {
  if (path.startsWith("seed/")) return "seed";
  return path.split("/")[1].replace(/\.tsx?$/, "");
}

const files: SourceFile[] = [...sourcesUnder("src"), ...sourcesUnder("seed")]
  .sort()
  .map((path) => ({ path, layer: layerOf(path), text: readFileSync(join(ROOT, path), "utf8") }));

interface Import {
  from: string;
  isType: boolean;
}

function importsOf(text: string): Import[] {
  const found: Import[] = [];
  for (const [, type, from] of text.matchAll(/^\s*(?:import|export) (type )?[^;"'`]*?from ["']([^"']+)["']/gm)) {
    found.push({ from, isType: type !== undefined });
  }
  for (const [, from] of text.matchAll(/^\s*import ["']([^"']+)["']/gm)) found.push({ from, isType: false });
  for (const [, from] of text.matchAll(/\bimport\(\s*["']([^"']+)["']/g)) found.push({ from, isType: false });
  return found;
}

/** Layer that an import leads to; null for packages, Node and the file's own folder. */
function targetLayer(from: string): string | null {
  if (from.startsWith("@seed/")) return "seed";
  return from.startsWith("@/") ? from.slice(2).split("/")[0] : null;
}

function packageOf(from: string): string | null {
  if (/^(\.|@\/|@seed\/|@tests\/|node:)/.test(from)) return null;
  return from.split("/").slice(0, from.startsWith("@") ? 2 : 1).join("/");
}

function offences(check: (file: SourceFile, used: Import) => boolean): string[] {
  return files.flatMap((file) => importsOf(file.text).filter((used) => check(file, used)).map((used) => `${file.path} imports ${used.from}`));
}

describe("the layers", () => {
  it("are all in the table", () => {
    expect([...new Set(files.map((file) => file.layer))].filter((layer) => !(layer in MAY_IMPORT))).toEqual([]);
  });

  it("import only what the table allows", () => {
    const isForbidden = ({ layer }: SourceFile, { from, isType }: Import) => {
      const target = targetLayer(from);
      if (target === null || target === layer) return false;
      return isType ? layer === "core" : !MAY_IMPORT[layer].includes(target);
    };
    expect(offences(isForbidden)).toEqual([]);
  });

  it("keep core free of packages and of Node, domain free of all but zod", () => {
    const isForbidden = ({ layer }: SourceFile, { from }: Import) => {
      const allowed = MAY_USE[layer];
      if (!allowed) return false;
      if (from.startsWith("node:")) return true;
      const name = packageOf(from);
      return name !== null && !allowed.includes(name);
    };
    expect(offences(isForbidden)).toEqual([]);
  });

  it("keep database, queue, map and framework where they belong", () => {
    const isForbidden = ({ layer }: SourceFile, { from, isType }: Import) => {
      const owners = BELONGS_TO[packageOf(from) ?? ""];
      return !isType && owners !== undefined && !owners.includes(layer);
    };
    expect(offences(isForbidden)).toEqual([]);
  });

  it("keep server code out of what the browser loads", () => {
    const isForbidden = ({ text }: SourceFile, { from, isType }: Import) => {
      const isClient = /^\s*["']use client["']/.test(text);
      return isClient && !isType && ["services", "db", "server", "env", "jobs", "mail", "storage"].includes(targetLayer(from) ?? "");
    };
    expect(offences(isForbidden)).toEqual([]);
  });

  it("are crossed by their full address, never by ../../", () => {
    expect(offences((_, { from }) => from.startsWith("../../"))).toEqual([]);
  });
});

describe("a source file", () => {
  it("stays below the line limit", () => {
    const long = files.filter((file) => file.text.split("\n").length > LINE_LIMIT && !(file.path in LONGER));
    expect(long.map((file) => `${file.path}: ${file.text.split("\n").length}`)).toEqual([]);
  });

  it("has a name in kebab case", () => {
    const odd = files.filter((file) => !/^[a-z0-9.[\]()@-]+$/.test(file.path.split("/").at(-1) ?? ""));
    expect(odd.map((file) => file.path)).toEqual([]);
  });

  it("leaves nothing to be done later", () => {
    const unfinished = files.filter((file) => /\b(TODO|FIXME|XXX)\b/.test(file.text));
    expect(unfinished.map((file) => file.path)).toEqual([]);
  });

  it("in core asks neither clock nor chance", () => {
    const impure = files.filter((file) => file.layer === "core" && /\b(Date\.now|new Date\(\)|Math\.random|performance\.now)\b/.test(file.text));
    expect(impure.map((file) => file.path)).toEqual([]);
  });
});
