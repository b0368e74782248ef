import type { Problem } from "@/domain/errors";

/** What is wrong with the whole form. Problems of a field stand at the field. */
export function FormProblem({ problem }: { problem: Problem | null }) {
  if (!problem) return null;
  return (
    <p role="alert" className="border-l-[3px] border-tail pl-3 font-medium">
      {problemSentence(problem.message)}
      {problem.code === "unauthenticated" ? <SignInLink /> : null}
    </p>
  );
}

/** Machines are told a field by its name in the request; a person sees the field marked. */
export function problemSentence(message: string): string {
  return message.replace(/^Check [\w.]+: /, "");
}

/** In a window of its own, so that what was typed here stays. */
function SignInLink() {
  return (
    <>
      {" "}
      <a className="text-link" href="/sign-in" target="_blank" rel="noopener">
        Sign in in another window
      </a>
      , then try again here.
    </>
  );
}
