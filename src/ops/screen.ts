import { AppError } from "@/domain/errors";
import { runScreen } from "./screen/run-screen";
import { screenArguments, USAGE } from "./screen/screen-arguments";

const say = (line: string) => void process.stderr.write(`${line}\n`);

async function main(): Promise<number> {
  const args = screenArguments(process.argv.slice(2));
  if (args === "help") {
    process.stdout.write(`${USAGE}\n`);
    return 0;
  }
  await runScreen(args, say);
  return 0;
}

try {
  process.exitCode = await main();
} catch (error) {
  if (!(error instanceof AppError)) throw error;
  say(`screen: ${error.message}`);
  process.exitCode = 1;
}
