import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";

import { MAIN_SAMPLINGS, type MeasuredAccuracy } from "@/ui/methods/accuracy";
import { METHOD_VERSION } from "@/core/method-version";

import type { Recording } from "./recording";
import { REQUIREMENTS, missedFigures } from "./requirements";
import { runOnRecording } from "./run-core";
import type { Sampling } from "./samplings";
import { coverIntervals } from "./scoring/interval-coverage";
import { scoreScreen } from "./score";
import type { Scores } from "./score";

/** One line of the product's statement of accuracy. */
export interface AccuracyRow {
  scenario: string;
  title: string;
  isHoldOut: boolean;
  sampling: string;
  junctions: number;
  scores: Scores;
  /** 95 % intervals for a movement's mean delay, and how many of them hold the whole traffic's mean. */
  intervals: number;
  intervalsInside: number;
  /** Figures that miss the accuracy to reach; empty where all are met or nothing is required. */
  missed: string[];
}

export interface AccuracyTable {
  methodVersion: number | string;
  rows: AccuracyRow[];
}

const JSON_PATH = join(import.meta.dirname, "accuracy.json");
const TEXT_PATH = join(import.meta.dirname, "accuracy.md");
const PAGE_PATH = join(import.meta.dirname, "../../src/ui/methods/accuracy.json");

export function measureAccuracy(recording: Recording, sampling: Sampling, isHoldOut: boolean): AccuracyRow {
  const run = runOnRecording(recording, sampling);
  const scores = rounded(scoreScreen(run.input));
  const coverage = coverIntervals(run);
  const { scenario, title, junctions } = recording.truth;
  const required = REQUIREMENTS[sampling.name];
  return {
    scenario,
    title,
    isHoldOut,
    sampling: sampling.name,
    junctions: junctions.length,
    scores,
    intervals: coverage.intervals,
    intervalsInside: coverage.inside,
    missed: required ? missedFigures(scores, required, junctions.length) : [],
  };
}

function rounded(scores: Scores): Scores {
  return JSON.parse(JSON.stringify(scores, (_, value) => (typeof value === "number" && !Number.isNaN(value) ? Number(value.toFixed(4)) : value)));
}

/** JSON has no NaN: what the sample cannot say is written as null and read as null, which compares as no claim. */
export function readAccuracy(): AccuracyTable {
  return JSON.parse(readFileSync(JSON_PATH, "utf8"));
}

export function writeAccuracy(rows: AccuracyRow[]) {
  const lines = rows.map((row) => JSON.stringify(row)).join(",\n");
  writeFileSync(JSON_PATH, `{"methodVersion":${JSON.stringify(METHOD_VERSION)},"rows":[\n${lines}\n]}\n`);
  writeFileSync(TEXT_PATH, accuracyText(rows));
  writeFileSync(PAGE_PATH, `[\n${rows.flatMap(pageLine).join(",\n")}\n]\n`);
}

/** What the methods page shows of a row; samplings that no accuracy is stated for are left out. */
export function pageLine(row: AccuracyRow): string[] {
  if (!MAIN_SAMPLINGS.some((sampling) => sampling === row.sampling)) return [];
  const { scores } = row;
  const shown: MeasuredAccuracy = {
    network: row.scenario,
    isKeptAside: row.isHoldOut,
    sampling: row.sampling,
    delayErrorS: toDigits(scores.delayMaeS.ours, 2),
    sampleErrorS: toDigits(scores.delayMaeS.oracle, 2),
    biasS: toDigits(scores.delayBiasS.ours, 2),
    turnsRight: toDigits(scores.turnsRight, 3),
    legsFound: toDigits(scores.legRecall, 3),
    legsTrue: toDigits(scores.legPrecision, 3),
    reachErrorM: toDigits(scores.reachMaeM.ours, 1),
    sampleReachErrorM: toDigits(scores.reachMaeM.oracle, 1),
    intervalsHold: row.intervals > 0 ? toDigits(row.intervalsInside / row.intervals, 3) : null,
  };
  return [JSON.stringify(shown)];
}

const toDigits = (value: number, digits: number) => Number(value.toFixed(digits));

const HEAD = [
  "scenario", "sampling", "legs found / true", "turns", "count error",
  "delay error s: ours", "oracle", "ratio", "bias s: ours", "oracle",
  "stop share: ours", "oracle", "reach m: ours", "oracle", "spillback P / R: ours", "oracle",
  "rank delay: ours", "oracle", "rank veh-h: ours", "oracle", "in 95 % interval", "missed",
];

/** The table as Markdown. */
export function accuracyText(rows: AccuracyRow[]): string {
  const cells = rows.map(rowCells);
  return [
    "# Accuracy on the reference set",
    "",
    "Written by `npm run validate -- --write`. Each line is one simulated network with known truth, sampled as the line says.",
    "`oracle` is the same figure from the true one-second courses of the very same sampled vehicles: what remains after it is our own error.",
    "Delay, stops: mean absolute error per movement, weighted by vehicles. Reach: of the legs that the sample used, against the true maximum.",
    "Scenarios marked * were kept aside while the method was tuned.",
    "",
    ...summaryLines(rows),
    "",
    `| ${HEAD.join(" | ")} |`,
    `|${HEAD.map(() => "---|").join("")}`,
    ...cells.map((line) => `| ${line.join(" | ")} |`),
    "",
  ].join("\n");
}

/** One line for each sampling: the mean over scenarios, and all intervals together. */
function summaryLines(rows: AccuracyRow[]): string[] {
  const head = ["sampling", "scenarios", "delay error above the oracle s: mean", "worst", "turns: mean", "in 95 % interval", "figures missed"];
  const lines = [...new Set(rows.map((row) => row.sampling))].map((sampling) => {
    const own = rows.filter((row) => row.sampling === sampling);
    const sum = (value: (row: AccuracyRow) => number) => own.reduce((total, row) => total + value(row), 0);
    const excess = (row: AccuracyRow) => row.scores.delayMaeS.ours - row.scores.delayMaeS.oracle;
    return [
      sampling,
      own.length.toString(),
      (sum(excess) / own.length).toFixed(2),
      Math.max(...own.map(excess)).toFixed(2),
      (sum((row) => row.scores.turnsRight) / own.length).toFixed(3),
      `${((100 * sum((row) => row.intervalsInside)) / sum((row) => row.intervals)).toFixed(1)} %`,
      sum((row) => row.missed.length).toString(),
    ];
  });
  return [head, head.map(() => "---"), ...lines].map((line) => `| ${line.join(" | ")} |`);
}

function rowCells({ scenario, isHoldOut, sampling, scores, intervals, intervalsInside, missed }: AccuracyRow): string[] {
  const fixed = (value: number | null, digits: number) => (value === null || Number.isNaN(value) ? "–" : value.toFixed(digits));
  const pair = (of: { ours: number; oracle: number }, digits: number) => [fixed(of.ours, digits), fixed(of.oracle, digits)];
  const spill = (who: "ours" | "oracle") => `${fixed(scores.spillbackPrecision[who], 2)} / ${fixed(scores.spillbackRecall[who], 2)}`;
  return [
    isHoldOut ? `${scenario} *` : scenario,
    sampling,
    `${fixed(scores.legPrecision, 3)} / ${fixed(scores.legRecall, 3)}`,
    fixed(scores.turnsRight, 3),
    fixed(scores.countError, 3),
    ...pair(scores.delayMaeS, 2),
    fixed(scores.delayMaeS.ours / scores.delayMaeS.oracle, 2),
    ...pair(scores.delayBiasS, 2),
    ...pair(scores.stopShareMae, 3),
    ...pair(scores.reachMaeM, 1),
    spill("ours"),
    spill("oracle"),
    ...pair(scores.rankByDelay, 3),
    ...pair(scores.rankByVehicleHours, 3),
    intervals > 0 ? `${((100 * intervalsInside) / intervals).toFixed(0)} % of ${intervals}` : "–",
    missed.join(", "),
  ];
}
