import { angleBetweenDeg } from "@/core/geometry/angles";
import { pointAt, projectPoint } from "@/core/geometry/polyline";
import type { Joined } from "@/core/legs/join";
import type { Exit, Leg } from "@/core/types";

/** Two lines of one junction that run together from fromM on, nearer than besideM on average, are one street; shorter ones are compared as a whole. */
const FROM_M = 30;
const TO_M = 170;
const STEP_M = 20;
const BESIDE_M = 9;
const LEAST_POINTS = 3;
const MOST_TURN_DEG = 50;

/** Drops the weaker of legs, and of exits, that two seeds traced along one street. O(legs of a junction squared). */
export function dropTwins(joined: Joined): Joined {
  const exitOf = twinOf(joined.exits);
  const exits = joined.exits.filter((_, i) => exitOf[i] === i);
  const place = new Int32Array(joined.exits.length);
  let next = 0;
  for (let i = 0; i < place.length; i++) if (exitOf[i] === i) place[i] = next++;
  const hung = joined.legs.map((leg) => ({
    ...leg,
    upstreamExit: leg.upstreamExit >= 0 ? place[exitOf[leg.upstreamExit]] : -1,
  }));
  const legOf = twinOf(hung);
  const legs = hung.filter((_, i) => legOf[i] === i);
  return { legs, exits };
}

/** For each item the stronger one that it runs along, itself where there is none. */
function twinOf(items: (Leg | Exit)[]): Int32Array {
  const twin = Int32Array.from(items, (_, i) => i);
  const byJunction = new Map<number, number[]>();
  items.forEach((item, i) => byJunction.set(item.junction, [...(byJunction.get(item.junction) ?? []), i]));
  for (const members of byJunction.values()) {
    members.sort((a, b) => items[b].support - items[a].support || a - b);
    members.forEach((i, n) => {
      const stronger = members.slice(0, n).find((k) => twin[k] === k && runAlong(items[k], items[i]));
      if (stronger !== undefined) twin[i] = stronger;
    });
  }
  return twin;
}

function runAlong(a: Leg | Exit, b: Leg | Exit): boolean {
  if (angleBetweenDeg(a.bearingDeg, b.bearingDeg) > MOST_TURN_DEG) return false;
  const end = Math.min(TO_M, a.lengthM, b.lengthM);
  const isShort = end < FROM_M + (LEAST_POINTS - 1) * STEP_M;
  const from = isShort ? end / LEAST_POINTS : FROM_M;
  const step = isShort ? from : STEP_M;
  let sum = 0;
  let points = 0;
  for (let at = from; at <= end + 1e-6; at += step, points++) {
    const [x, y] = pointAt(b.line, at);
    sum += Math.abs(projectPoint(a.line, x, y).offset);
  }
  return points >= LEAST_POINTS && sum / points < BESIDE_M;
}
