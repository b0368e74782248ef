"use client";

import { useState } from "react";
import type { ActionResult, Problem } from "@/domain/errors";

const UNREACHED: Problem = { code: "internal", message: "The server could not be reached. Check the connection and try again." };

/** Runs a server action from a form: busy while it runs, its problem in words when it is refused. */
export function useAction<I, O>(action: (input: I) => Promise<ActionResult<O>>) {
  const [problem, setProblem] = useState<Problem | null>(null);
  const [isBusy, setBusy] = useState(false);

  async function run(input: I): Promise<{ data: O } | null> {
    setBusy(true);
    setProblem(null);
    try {
      const result = await action(input);
      if (result.ok) return { data: result.data };
      setProblem(result);
      return null;
    } catch {
      setProblem(UNREACHED);
      return null;
    } finally {
      setBusy(false);
    }
  }

  return { run, isBusy, problem, setProblem };
}
