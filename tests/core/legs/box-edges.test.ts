import { describe, expect, it } from "vitest";
import { placeBoxEdges } from "@/core/legs/box-edges";
import type { Exit, Leg } from "@/core/types";

/** An exit to the south drawn from 14 m on, and the leg beside it, whose stop line lies `outM` south of the junction's point. */
function beginning(outM: number): number[] {
  const leg = { id: "in", junction: 0, bearingDeg: 0, line: Float64Array.of(3, -outM, 3, -200), lengthM: 200 - outM, upstreamExit: -1, origin: "derived" } as Leg;
  const exit = { id: "out", junction: 0, bearingDeg: 180, line: Float64Array.of(-3, -14, -3, -200), lengthM: 186 } as Exit;
  const [moved] = placeBoxEdges([leg], [exit]).exits;
  return [moved.line[1], moved.lengthM];
}

describe("where an exit begins", () => {
  it.each([10, 14, 26, 50])("is abreast of a stop line %d m from the junction's point", (outM) => {
    const [y, lengthM] = beginning(outM);
    expect(y).toBeCloseTo(-outM, 6);
    expect(lengthM).toBeCloseTo(200 - outM, 6);
  });
});
