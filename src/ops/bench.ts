import { writeFileSync } from "node:fs";
import { benchArguments, USAGE, type BenchArguments } from "./bench/bench-arguments";
import { benchIngest, benchWorkers } from "./bench/bench-ingest";
import { benchParse } from "./bench/bench-parse";
import { openContext, openPlace, type BenchPlace } from "./bench/bench-place";
import { benchRanking } from "./bench/bench-ranking";
import { benchStrip } from "./bench/bench-strip";
import { figureLine, figuresTable, type Figure } from "./bench/figures";
import { fillScreenCity } from "./bench/screen-city";

const RESULTS = "tests/bench/results.md";

const asked = readArguments();
if (asked === "help") console.log(USAGE);
else if (asked !== null) await bench(asked);

function readArguments(): BenchArguments | "help" | null {
  try {
    return benchArguments(process.argv.slice(2));
  } catch (error) {
    console.error(`${error instanceof Error ? error.message : String(error)}\n\n${USAGE}`);
    process.exitCode = 1;
    return null;
  }
}

async function bench(wanted: BenchArguments): Promise<void> {
  const place = await openPlace();
  const figures: Figure[] = [];
  for (const signal of ["SIGINT", "SIGTERM"] as const) process.once(signal, () => void place.close().finally(() => process.exit(1)));
  try {
    for await (const figure of measure(place, wanted)) {
      figures.push(figure);
      console.log(wanted.isJson ? JSON.stringify(figure) : figureLine(figure));
    }
  } finally {
    await place.close();
  }
  if (wanted.isWrite) writeFileSync(RESULTS, figuresTable(figures, sizeOf(wanted)));
}

async function* measure(place: BenchPlace, wanted: BenchArguments): AsyncGenerator<Figure> {
  const { parts, rows } = wanted;
  if (parts.includes("parse")) yield* await benchParse(place.folder, rows);
  if (parts.includes("ingest")) yield* await benchIngest(place, rows);
  if (parts.includes("workers")) yield* await benchWorkers(place, rows);
  if (parts.includes("ranking") || parts.includes("strip")) yield* await measureScreens(place, wanted);
}

async function measureScreens(place: BenchPlace, wanted: BenchArguments): Promise<Figure[]> {
  const open = openContext(await place.newDatabase("screens"), place.folder);
  try {
    await fillScreenCity(open.ctx.db, wanted);
    const ranking = wanted.parts.includes("ranking") ? await benchRanking(open, place.folder) : [];
    const strip = wanted.parts.includes("strip") ? await benchStrip(open) : [];
    return [...ranking, ...strip];
  } finally {
    await open.close();
  }
}

function sizeOf({ rows, junctions, days, traversals }: BenchArguments): string {
  return `${rows} pings over 500 junctions; a screen of ${junctions} junctions, ${days} days and ${traversals} traversals`;
}
