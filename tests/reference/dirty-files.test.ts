import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";

import { afterAll, beforeAll, describe, expect, it } from "vitest";

import { runScreen } from "@/ops/screen/run-screen";

import { createRandom } from "./random";
import { readRecording } from "./recording";
import { pingsOf } from "./run-core";
import { PING_HEADER, pingLine } from "./sampling";
import { MAIN_SAMPLINGS } from "./samplings";

const recording = readRecording("left");
const lines = pingsOf(recording, MAIN_SAMPLINGS[1]).map(pingLine);

let folder: string;
let clean: string;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), "dirty-files-"));
  const junctions = recording.truth.junctions.map(({ id, name, lat, lon }) => `${id},${name},${lat},${lon}`);
  writeFileSync(join(folder, "junctions.csv"), `junction_id,name,lat,lon\n${junctions.join("\n")}\n`);
  clean = await screen([[PING_HEADER, ...lines].join("\n")]);
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Rows that the screen command writes for ping files of the given text or bytes. */
async function screen(files: (string | Uint8Array)[]): Promise<string> {
  const pings = files.map((file, i) => join(folder, `pings-${i}.csv${typeof file === "string" ? "" : ".gz"}`));
  pings.forEach((path, i) => writeFileSync(path, files[i]));
  const out = join(folder, "out.csv");
  await runScreen({ pings, junctions: join(folder, "junctions.csv"), out, timeZone: null, driveSide: "left" }, () => {});
  return readFileSync(out, "utf8");
}

function shuffled<T>(values: T[]): T[] {
  const random = createRandom(9);
  const out = [...values];
  for (let i = out.length - 1; i > 0; i--) {
    const j = Math.floor(random.next() * (i + 1));
    [out[i], out[j]] = [out[j], out[i]];
  }
  return out;
}

/** Every twentieth row is followed by what `make` makes of it. */
function withExtra(make: (cells: string[], k: number) => string): string[] {
  return lines.flatMap((line, k) => (k % 20 === 0 ? [line, make(line.split(","), k)] : [line]));
}

describe("dirty files give the clean file's rows", { timeout: 120_000 }, () => {
  it("has rows to compare", () => {
    expect(clean.split("\n").length).toBeGreaterThan(300);
  });

  it("with shuffled and repeated rows, byte order mark and Windows line ends", async () => {
    const dirty = shuffled([...lines, ...lines.filter((_, k) => k % 7 === 0)]);
    expect(await screen([`\uFEFF${[PING_HEADER, ...dirty].join("\r\n")}\r\n`])).toBe(clean);
  });

  it("with semicolons and decimal commas", async () => {
    const european = [PING_HEADER, ...lines].map((line) => line.replaceAll(",", ";").replaceAll(".", ","));
    expect(await screen([european.join("\n")])).toBe(clean);
  });

  it("with ISO 8601 times of another zone", async () => {
    const iso = lines.map((line) => {
      const [vehicle, t, ...rest] = line.split(",");
      return [vehicle, new Date(Number(t) + 7_200_000).toISOString().replace("Z", "+02:00"), ...rest].join(",");
    });
    expect(await screen([[PING_HEADER, ...iso].join("\n")])).toBe(clean);
  });

  it("split in the middle of a vehicle, in the wrong order, one part compressed and one given twice", async () => {
    const cut = Math.floor(lines.length / 3);
    const part = (from: number, to?: number) => [PING_HEADER, ...lines.slice(from, to)].join("\n");
    expect(await screen([part(cut), gzipSync(part(0, cut)), part(cut)])).toBe(clean);
  });

  it("with rows that cannot be used between the good ones", async () => {
    const bad = withExtra(([vehicle, t, lat, lon], k) =>
      [`${vehicle},${t},95.2,${lon},10,90`, `${vehicle},yesterday,${lat},${lon},10,90`, `,${t},${lat},${lon},10,90`, `${vehicle},${t}`][(k / 20) % 4],
    );
    expect(await screen([[PING_HEADER, ...bad].join("\n")])).toBe(clean);
  });

  it("with single fixes that jump kilometres away", async () => {
    const jumping = withExtra(([vehicle, t, lat, lon]) => `${vehicle},${Number(t) + 3000},${(Number(lat) + 0.06).toFixed(6)},${lon},50,10`);
    expect(await screen([[PING_HEADER, ...jumping].join("\n")])).toBe(clean);
  });

  it("with vehicles far from every junction", async () => {
    const far = withExtra(([vehicle, t], k) => `far-${vehicle}-${k},${t},46.9,-37.1,40,10`);
    expect(await screen([[PING_HEADER, ...far].join("\n")])).toBe(clean);
  });
});
