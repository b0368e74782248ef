import { execFileSync } from "node:child_process";

/** Runs one of the simulator's programs and turns a failure into its own words. */
export function runProgram(program: "netgenerate" | "netconvert" | "duarouter" | "sumo", args: string[]): void {
  try {
    execFileSync(program, args, { stdio: ["ignore", "pipe", "pipe"], maxBuffer: 1 << 26 });
  } catch (error) {
    const said = error instanceof Error && "stderr" in error ? String(error.stderr) : String(error);
    throw new Error(`${program} failed: ${said.slice(0, 2000)}`, { cause: error });
  }
}
