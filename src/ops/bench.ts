import { writeFileSync } from "node:fs";
import { benchArguments, USAGE, type BenchArguments } from "./bench/bench-arguments";
import { benchBrowser } from "./bench/bench-browser";
import { benchCrowd } from "./bench/bench-crowd";
import { benchIngest, benchMemory, benchWorkers } from "./bench/bench-ingest";
import { benchParse } from "./bench/bench-parse";
import { openContext, openPlace, type BenchPlace, type OpenContext } from "./bench/bench-place";
import { benchRanking } from "./bench/bench-ranking";
import { benchStrip } from "./bench/bench-strip";
import { figureLine, figuresTable, type Figure } from "./bench/figures";
import { startProduct } from "./bench/product";
import { fillScreenCity } from "./bench/screen-city";

const SCREEN_PARTS = ["ranking", "strip", "browser", "crowd"] as const;
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
  if (parts.includes("memory")) yield* await benchMemory(place, wanted.memoryRows);
  if (SCREEN_PARTS.some((part) => parts.includes(part))) yield* measureScreens(place, wanted);
}

/** The parts that look at one generated city. */
async function* measureScreens(place: BenchPlace, wanted: BenchArguments): AsyncGenerator<Figure> {
  const { parts } = wanted;
  const url = await place.newDatabase("screens");
  const open = openContext(url, place.folder);
  try {
    await fillScreenCity(open.ctx.db, wanted);
    if (parts.includes("ranking")) yield* await benchRanking(open, place.folder);
    if (parts.includes("strip")) yield* await benchStrip(open);
    if (parts.includes("browser") || parts.includes("crowd")) yield* measureProduct(place, url, open, wanted);
  } finally {
    await open.close();
  }
}

/** What needs pages that are served. The crowd adds to the city, hence last. */
async function* measureProduct(place: BenchPlace, url: string, open: OpenContext, wanted: BenchArguments): AsyncGenerator<Figure> {
  const product = await startProduct(url, place.folder);
  try {
    if (wanted.parts.includes("browser")) yield* await benchBrowser(product, open.database.pool);
    if (wanted.parts.includes("crowd")) yield* await benchCrowd(product, open.database.pool, place.folder, wanted);
  } finally {
    await product.stop();
  }
}

function sizeOf({ rows, junctions, days, traversals }: BenchArguments): string {
  return `${rows} pings over 500 junctions; a screen of ${junctions} junctions, ${days} days and ${traversals} traversals`;
}
