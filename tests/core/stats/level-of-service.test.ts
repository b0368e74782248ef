import { describe, expect, it } from "vitest";
import { levelOfService } from "@/core/stats/level-of-service";

describe("levelOfService", () => {
  // Highway Capacity Manual, 7th edition, Exhibit 19-8: upper bounds are inclusive.
  it.each([
    [-2, "A"],
    [10, "A"],
    [10.000001, "B"],
    [20, "B"],
    [35, "C"],
    [55, "D"],
    [80, "E"],
    [80.01, "F"],
  ])("grades %d s", (delayS, letter) => expect(levelOfService(delayS)).toBe(letter));

  it("grades a lane group above capacity F, whatever its delay, and an approach by delay", () => {
    expect(levelOfService(12, true)).toBe("F");
    expect(levelOfService(12)).toBe("B");
  });

  it("grades nothing where there is no delay", () => expect(levelOfService(NaN)).toBeNull());

  it("takes another country's bounds as data", () => {
    const korea2013 = [{ letter: "A" as const, upToS: 15 }, { letter: "B" as const, upToS: 30 }];
    expect(levelOfService(14, false, korea2013)).toBe("A");
    expect(levelOfService(31, false, korea2013)).toBeNull();
  });
});
