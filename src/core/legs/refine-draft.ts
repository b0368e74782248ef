import { lengthOf } from "@/core/geometry/polyline";
import { exitBearingDeg, legBearingDeg, seenFrom } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import { refineLine } from "@/core/legs/refine";
import type { Usage } from "@/core/legs/usage";
import type { Exit, Leg, Network } from "@/core/types";

/**
 * Moves derived legs to the middle of their matched pings; exits follow the leg that they feed most, those that lead
 * into the open their own pings. Drawn, locked and carried ones stay where they are.
 */
export function refineDraft(draft: Network, usage: Usage, carried: Set<string>, frame: Frame): Network {
  const legs = draft.legs.map((leg, i) => refineLeg(leg, i, usage, carried));
  const mostFed = new Int32Array(draft.exits.length).fill(-1);
  legs.forEach((leg, i) => {
    const exit = leg.upstreamExit;
    if (exit >= 0 && usage.fed[i] > 0 && (mostFed[exit] < 0 || usage.fed[i] > usage.fed[mostFed[exit]])) mostFed[exit] = i;
  });
  const exits = draft.exits.map((exit, i) => refineExit(exit, i, mostFed[i] >= 0 ? legs[mostFed[i]] : null, usage, carried, frame));
  return { ...draft, legs, exits };
}

function refineLeg(leg: Leg, i: number, usage: Usage, carried: Set<string>): Leg {
  const isFixed = leg.origin !== "derived" || leg.locked || carried.has(leg.id);
  const line = isFixed ? null : refineLine(leg.line, usage.legOffsets[i]);
  return line ? { ...leg, line, lengthM: lengthOf(line), bearingDeg: legBearingDeg(line) } : leg;
}

function refineExit(exit: Exit, i: number, fed: Leg | null, usage: Usage, carried: Set<string>, frame: Frame): Exit {
  if (carried.has(exit.id)) return exit;
  const line = fed ? seenFrom(frame, fed.line, fed.junction, exit.junction) : refineLine(exit.line, usage.exitOffsets[i]);
  return line ? { ...exit, line, lengthM: lengthOf(line), bearingDeg: exitBearingDeg(line) } : exit;
}
