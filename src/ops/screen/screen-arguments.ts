import { parseArgs } from "node:util";
import type { DriveSide } from "@/core/types";
import { AppError } from "@/domain/errors";
import { isTimeZone } from "@/domain/settings";

export const USAGE = `npm run screen -- --pings FILE [--pings FILE ...] --junctions FILE --out FILE [--timezone TZ] [--drive-side right|left]

  --pings FILE       pings, CSV or GeoJSON, gzip or not; may be given several times
  --junctions FILE   junctions, CSV or GeoJSON points
  --out FILE         where to write the figures, as CSV
  --timezone TZ      zone of times that carry none, such as Atlantic/Azores
  --drive-side SIDE  side of the road that vehicles keep to: right (default) or left`;

export interface ScreenArguments {
  pings: string[];
  junctions: string;
  out: string;
  timeZone: string | null;
  driveSide: DriveSide;
}

/** What was asked for, "help" if it was help; throws a sentence for anything that makes no sense. */
export function screenArguments(argv: string[]): ScreenArguments | "help" {
  const { values, positionals } = parsed(argv);
  if (values.help) return "help";
  if (positionals.length > 0) throw wrong(`"${positionals[0]}" stands alone: put --pings, --junctions or --out before a file.`);
  const { pings = [], junctions, out, timezone, "drive-side": driveSide } = values;
  if (pings.length === 0) throw wrong("--pings FILE is missing.");
  if (!junctions) throw wrong("--junctions FILE is missing.");
  if (!out) throw wrong("--out FILE is missing.");
  if (timezone !== undefined && !isTimeZone(timezone)) throw wrong(`--timezone ${timezone} is no time zone. Give one such as Atlantic/Azores.`);
  if (driveSide !== "right" && driveSide !== "left") throw wrong(`--drive-side ${driveSide} is neither right nor left.`);
  return { pings, junctions, out, timeZone: timezone ?? null, driveSide };
}

function parsed(argv: string[]) {
  try {
    return parseArgs({
      args: argv,
      allowPositionals: true,
      options: {
        pings: { type: "string", multiple: true },
        junctions: { type: "string" },
        out: { type: "string" },
        timezone: { type: "string" },
        "drive-side": { type: "string", default: "right" },
        help: { type: "boolean", short: "h", default: false },
      },
    });
  } catch (error) {
    throw wrong(error instanceof Error ? error.message : String(error));
  }
}

function wrong(sentence: string): AppError {
  return new AppError("invalid", `${sentence}\n\n${USAGE}`);
}
