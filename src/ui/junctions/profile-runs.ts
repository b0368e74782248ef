import type { ProfilePoint } from "@/domain/junction";

/** Neighbouring quarters that all have a figure. */
export type ProfileRun = { fromMin: number; value: number; low: number; high: number }[];

/** The profile cut where a quarter has no figure: a line across a gap would claim what nobody saw. */
export function profileRuns(profile: ProfilePoint[]): ProfileRun[] {
  const runs: ProfileRun[] = [];
  let open: ProfileRun | null = null;
  for (const { fromMin, delay } of profile) {
    if (!delay) {
      open = null;
      continue;
    }
    if (!open) runs.push((open = []));
    open.push({ fromMin, ...delay });
  }
  return runs;
}
