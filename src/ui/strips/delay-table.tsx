"use client";

import { EVIDENCE_RULES } from "@/core/scores/evidence";
import { levelOfService } from "@/core/stats/level-of-service";
import { formatLength, NO_FIGURE } from "@/ui/format";
import { useCity } from "@/ui/shell/city";
import { FiguresByTime, type DelayStep } from "./figures-by-time";
import type { StripPicture } from "./strip-picture";

/** A grade is a verdict, for which fewer vehicles than thin evidence asks for are too few. */
const LEAST_GRADED = Math.min(...EVIDENCE_RULES.map((rule) => rule.vehicles));

const HEADS = [{ head: "level of service" }, { head: "farthest tail", numeric: true }];

/** The curves below a strip as figures. */
export function DelayTable({ picture }: { picture: StripPicture }) {
  const { settings, locale } = useCity();
  const { delay, tail } = picture;
  const steps = Array.from(delay.meanS, (value, k): DelayStep => {
    const [fromS, toS] = [delay.fromS + k * delay.stepS, delay.fromS + (k + 1) * delay.stepS];
    const grade = delay.vehicles[k] >= LEAST_GRADED ? levelOfService(value) : null;
    return {
      fromMin: fromS / 60,
      toMin: toS / 60,
      vehicles: delay.vehicles[k],
      delay: { value, low: delay.lowS[k], high: delay.highS[k] },
      more: [grade ?? NO_FIGURE, formatLength(farthestTail(tail, fromS, toS), settings.units, locale)],
    };
  });
  return <FiguresByTime caption="Delay and reach by time of day" moreHeads={HEADS} steps={steps} className="border-t border-rule px-4 py-2.5 sm:px-6" />;
}

/** Largest value of the tail line between two times; null where it says nothing. */
export function farthestTail(tail: StripPicture["tail"], fromS: number, toS: number): number | null {
  let farthest: number | null = null;
  for (let column = 0; column < tail.columns; column++) {
    const middle = tail.fromS + (column + 0.5) * tail.columnS;
    const reach = tail.reachM[column];
    if (middle >= fromS && middle < toS && reach >= 0) farthest = Math.max(farthest ?? 0, reach);
  }
  return farthest;
}
