import { accuracyText, measureAccuracy, writeAccuracy } from "@tests/reference/accuracy";
import { readRecording } from "@tests/reference/recording";
import { samplingsOf } from "@tests/reference/samplings";
import { HOLD_OUT, TUNING } from "@tests/reference/scenarios/index";

const USAGE = `Usage: npm run validate -- [--write] [--main] [scenario ...]
Runs the core over the recorded reference set and prints its accuracy beside the oracle's.
  --write   keep the table in tests/reference/accuracy.json and accuracy.md (whole set only)
  --main    only the samplings that the accuracy to reach is stated for`;

const args = process.argv.slice(2);
const wanted = args.filter((arg) => !arg.startsWith("--"));
const isWrite = args.includes("--write");
const unknown = args.filter((arg) => arg.startsWith("--") && !["--write", "--main"].includes(arg));

if (unknown.length > 0 || (isWrite && (wanted.length > 0 || args.includes("--main")))) {
  process.stderr.write(`${USAGE}\n`);
  process.exitCode = 1;
} else {
  const scenarios = [...TUNING, ...HOLD_OUT].filter(({ id }) => wanted.length === 0 || wanted.includes(id));
  const rows = scenarios.flatMap((scenario) => {
    const recording = readRecording(scenario.id);
    process.stderr.write(`${scenario.id} ...\n`);
    const possible = samplingsOf(scenario.id, args.includes("--main")).filter(({ share }) => share * 100 in recording.oracle);
    return possible.map((sampling) => measureAccuracy(recording, sampling, HOLD_OUT.includes(scenario)));
  });
  if (isWrite) writeAccuracy(rows);
  process.stdout.write(accuracyText(rows));
}
