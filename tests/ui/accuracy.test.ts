import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { MAIN_SAMPLINGS, MEASURED_ACCURACY } from "@/ui/methods/accuracy";
import { pageLine, type AccuracyRow } from "@tests/reference/accuracy";

const { rows } = JSON.parse(readFileSync(new URL("../reference/accuracy.json", import.meta.url), "utf8")) as { rows: AccuracyRow[] };

describe("accuracy on the methods page", () => {
  it("is the recorded table, line by line", () => {
    expect(MEASURED_ACCURACY).toEqual(rows.flatMap(pageLine).map((line) => JSON.parse(line) as unknown));
  });

  it("shows every network under every sampling that accuracy is stated for, some of them kept aside", () => {
    const networks = new Set(MEASURED_ACCURACY.map((row) => row.network));
    expect(MEASURED_ACCURACY).toHaveLength(networks.size * MAIN_SAMPLINGS.length);
    expect(MEASURED_ACCURACY.some((row) => row.isKeptAside)).toBe(true);
  });
});
