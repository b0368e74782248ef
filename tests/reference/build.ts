/**
 * Runs the reference scenarios through Debian's traffic simulator and records them:
 *   npx tsx tests/reference/build.ts [--files DIR] [--no-record] [scenario ...]
 * Recordings go to tests/reference/recordings/. With --files, plain ping files, junctions and truth are
 * written too, to DIR/<scenario>/, hold-out scenarios to DIR-holdout/<scenario>/.
 */
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";

import { RECORDINGS, encodeCourses, toSampledCourses } from "./recording";
import type { RecordedTruth } from "./recording";
import { isSampled } from "./sampling";
import { HOLD_OUT, TUNING } from "./scenarios/index";
import type { Scenario } from "./scenarios/types";
import { drawStreets, rebuildAround, withGuessedSignals } from "./simulator/draw-streets";
import { readNetwork } from "./simulator/read-network";
import { simulate } from "./simulator/simulate";
import { writeNetwork } from "./simulator/write-network";
import { listPassages, measureTruth } from "./truth/measure-truth";
import type { Measured } from "./truth/measure-truth";
import { findPassages, indexLegs } from "./truth/passages";
import { findReferenceTimes, movementKey } from "./truth/reference-times";
import { findLegStreets } from "./truth/street-legs";
import { writeWorkingFiles } from "./working-files";

/** A Tuesday in September, seven in the morning UTC. */
const START_MS = Date.UTC(2026, 8, 15, 7);
const ORACLE_SHARES = [1, 0.2, 0.1, 0.05, 0.02];

async function measure(defined: Scenario): Promise<Measured> {
  const folder = mkdtempSync(join(tmpdir(), `reference-${defined.id}-`));
  try {
    const drawn = drawStreets(defined, folder);
    const plainPath = writeNetwork(drawn, folder);
    const scenario = withGuessedSignals(drawn, readNetwork(plainPath));
    const networkPath = rebuildAround(scenario, plainPath, folder);
    const network = readNetwork(networkPath);
    const legs = findLegStreets(network);
    const index = indexLegs(legs);
    const courses = await simulate(scenario, networkPath, network, folder);
    const passages = [...courses.values()].flatMap((course) => findPassages(course, index));
    const referenceS = await findReferenceTimes(scenario, networkPath, network, folder, passages, index);
    const known = passages.filter((passage) => !passage.isComplete || referenceS.has(movementKey(passage)));
    return { scenario, network, legs, courses, passages: known, referenceS, startMs: START_MS };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function recordTruth(measured: Measured): RecordedTruth {
  const { id, recordedShare } = measured.scenario;
  const oracle: RecordedTruth["oracle"] = {};
  for (const share of ORACLE_SHARES.filter((candidate) => candidate <= recordedShare)) {
    oracle[share * 100] = measureTruth(measured, (vehicle) => isSampled(id, vehicle, share), share === 1);
  }
  return {
    truth: measureTruth(measured, () => true, true),
    oracle,
    passages: listPassages(measured, (vehicle) => isSampled(id, vehicle, recordedShare)),
  };
}

function writeRecording(measured: Measured, recorded: RecordedTruth) {
  mkdirSync(RECORDINGS, { recursive: true });
  const sampled = [...measured.courses.values()].filter((course) => isSampled(measured.scenario.id, course.id, measured.scenario.recordedShare));
  const bytes = encodeCourses(sampled.flatMap(toSampledCourses));
  writeFileSync(join(RECORDINGS, `${measured.scenario.id}.courses.gz`), gzipSync(bytes, { level: 9 }));
  writeFileSync(join(RECORDINGS, `${measured.scenario.id}.truth.json.gz`), gzipSync(JSON.stringify(recorded), { level: 9 }));
}

async function main(args: string[]) {
  const filesAt = args.indexOf("--files");
  const files = filesAt >= 0 ? args[filesAt + 1] : undefined;
  const wanted = args.filter((arg, i) => !arg.startsWith("--") && (filesAt < 0 || i !== filesAt + 1));
  for (const scenario of [...TUNING, ...HOLD_OUT]) {
    if (wanted.length > 0 && !wanted.includes(scenario.id)) continue;
    const started = performance.now();
    const measured = await measure(scenario);
    const recorded = recordTruth(measured);
    if (!args.includes("--no-record")) writeRecording(measured, recorded);
    if (files) writeWorkingFiles(measured, recorded, HOLD_OUT.includes(scenario) ? `${files}-holdout` : files);
    const moved = [...measured.courses.values()].reduce((sum, course) => sum + toSampledCourses(course).length - 1, 0);
    const seconds = ((performance.now() - started) / 1000).toFixed(0);
    console.log(`${scenario.id}: ${measured.courses.size} vehicles, ${measured.passages.length} passages, ${moved} moved by hand, ${seconds} s`);
  }
}

await main(process.argv.slice(2));
