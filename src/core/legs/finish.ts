import { angleBetweenDeg, normaliseDeg } from "@/core/geometry/angles";
import type { Exit, Leg } from "@/core/types";

const FEW_TRIPS = 10;
const CLOSE_DEG = 35;
const SHORT_M = 60;

/** Gives every leg and exit an id of its own; carried ids come first and stay. */
export function settleIds<T extends Leg | Exit>(items: T[], carried: Set<string>): T[] {
  const used = new Set<string>(carried);
  const seen = new Set<string>();
  return items.map((item) => {
    if (carried.has(item.id) && !seen.has(item.id)) {
      seen.add(item.id);
      return item;
    }
    let id = item.id;
    for (let n = 2; used.has(id); n++) id = `${item.id}-${n}`;
    used.add(id);
    return { ...item, id };
  });
}

/** Tells legs of one junction with the same name apart by their bearing. */
export function settleNames(legs: Leg[]): Leg[] {
  const count = new Map<string, number>();
  const key = (leg: Leg): string => `${leg.junction} ${leg.name}`;
  for (const leg of legs) count.set(key(leg), (count.get(key(leg)) ?? 0) + 1);
  return legs.map((leg) => {
    const isClear = count.get(key(leg)) === 1 || leg.origin !== "derived";
    return isClear ? leg : { ...leg, name: `${leg.name} (${Math.round(normaliseDeg(leg.bearingDeg))}°)` };
  });
}

/** Sentences about what an engineer should look at on each leg. */
export function noteDoubts(legs: Leg[]): Leg[] {
  return legs.map((leg) => {
    if (leg.locked) return { ...leg, doubts: [] };
    const doubts: string[] = [];
    if (leg.support < FEW_TRIPS) doubts.push(`Only ${leg.support} trips show this leg.`);
    if (leg.stopLineOrigin === "default") doubts.push("Too few vehicles stood here to place the stop line; a default is used.");
    if (leg.upstreamExit < 0 && leg.lengthM < SHORT_M) doubts.push(`The leg could be followed for only ${Math.round(leg.lengthM)} m.`);
    for (const other of legs) {
      if (other === leg || other.junction !== leg.junction) continue;
      const angle = angleBetweenDeg(other.bearingDeg, leg.bearingDeg);
      if (angle < CLOSE_DEG) doubts.push(`It lies only ${Math.round(angle)} degrees from the leg ${other.name}.`);
    }
    return { ...leg, doubts };
  });
}
