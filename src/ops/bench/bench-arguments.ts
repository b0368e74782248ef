import { parseArgs } from "node:util";

export const PARTS = ["parse", "ingest", "workers", "ranking", "strip", "browser", "crowd", "memory"] as const;
/** Takes an hour and many gigabytes of disk. */
const ON_REQUEST: readonly Part[] = ["memory"];
export type Part = (typeof PARTS)[number];

export const USAGE = `npm run bench -- [--only NAME ...] [--rows N] [--junctions N] [--days N] [--traversals N] [--seconds N] [--large] [--json] [--write]

  --only NAME      one part: ${PARTS.join(", ")}; may be given several times
  --rows N         pings of the generated file (default 1000000; for memory, which is only measured when it is named, 50000000)
  --junctions N    junctions of the generated screen (default 300)
  --days N         its days (default 28: 20 weekdays)
  --traversals N   its traversals (default 1000000)
  --seconds N      how long the crowd is there (default 60)
  --large          10 million pings; 1,000 junctions, 60 days, 20 million traversals
  --json           one object a line
  --write          keep the table in tests/bench/results.md (whole bench only)`;

export interface BenchArguments {
  parts: Part[];
  rows: number;
  /** Pings of the file that shows that memory is bounded. */
  memoryRows: number;
  junctions: number;
  days: number;
  traversals: number;
  seconds: number;
  isJson: boolean;
  isWrite: boolean;
}

/** What was asked for; throws a sentence for anything that makes no sense. */
export function benchArguments(argv: string[]): BenchArguments | "help" {
  const { values } = parseArgs({
    args: argv,
    options: {
      only: { type: "string", multiple: true },
      rows: { type: "string" },
      junctions: { type: "string" },
      days: { type: "string" },
      traversals: { type: "string" },
      seconds: { type: "string" },
      large: { type: "boolean", default: false },
      json: { type: "boolean", default: false },
      write: { type: "boolean", default: false },
      help: { type: "boolean", short: "h", default: false },
    },
  });
  if (values.help) return "help";
  const only = values.only ?? [];
  const unknown = only.find((name) => !PARTS.some((part) => part === name));
  if (unknown !== undefined) throw new RangeError(`--only ${unknown} is no part of the bench. Give one of ${PARTS.join(", ")}.`);
  if (values.write && only.length > 0) throw new RangeError("--write keeps the whole table: leave --only out.");
  return {
    parts: PARTS.filter((part) => (only.length === 0 ? !ON_REQUEST.includes(part) : only.includes(part))),
    rows: count("--rows", values.rows, values.large ? 10_000_000 : 1_000_000),
    memoryRows: count("--rows", values.rows, 50_000_000),
    junctions: count("--junctions", values.junctions, values.large ? 1000 : 300),
    days: count("--days", values.days, values.large ? 60 : 28),
    traversals: count("--traversals", values.traversals, values.large ? 20_000_000 : 1_000_000),
    seconds: count("--seconds", values.seconds, 60),
    isJson: values.json,
    isWrite: values.write,
  };
}

function count(option: string, text: string | undefined, fallback: number): number {
  if (text === undefined) return fallback;
  const value = Number(text);
  if (!Number.isInteger(value) || value < 1) throw new RangeError(`${option} ${text} is no whole number from 1 on.`);
  return value;
}
