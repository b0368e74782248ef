import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { ACCURACY_BOUNDS } from "@/ui/methods/accuracy-bounds";

interface Pair {
  ours: number;
  oracle: number;
}
interface Row {
  sampling: string;
  scores: { delayMaeS: Pair; stopShareMae: Pair; reachMaeM: Pair };
}

const { rows } = JSON.parse(readFileSync(new URL("../reference/accuracy.json", import.meta.url), "utf8")) as { rows: Row[] };

describe("accuracy that the methods page states", () => {
  it.each(ACCURACY_BOUNDS)("holds on every reference network at $sampling", (bound) => {
    const measured = rows.filter((row) => row.sampling === bound.sampling).map((row) => row.scores);
    expect(measured.length).toBeGreaterThanOrEqual(5);
    for (const { delayMaeS, stopShareMae, reachMaeM } of measured) {
      expect(delayMaeS.ours).toBeLessThanOrEqual(bound.delayS);
      expect(delayMaeS.ours - delayMaeS.oracle).toBeLessThanOrEqual(bound.ownS);
      if (bound.stopShare !== null) expect(stopShareMae.ours).toBeLessThanOrEqual(bound.stopShare);
      if (bound.reachM !== null) expect(reachMaeM.ours).toBeLessThanOrEqual(bound.reachM);
    }
  });
});
