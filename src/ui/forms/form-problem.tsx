import type { Problem } from "@/domain/errors";

/** What is wrong with the whole form. Problems of a field stand at the field. */
export function FormProblem({ problem }: { problem: Problem | null }) {
  if (!problem) return null;
  return (
    <p role="alert" className="border-l-[3px] border-tail pl-3 font-medium">
      {problem.message}
    </p>
  );
}
