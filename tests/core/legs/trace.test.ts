import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { lengthOf } from "@/core/geometry/polyline";
import { createFrame } from "@/core/legs/frame";
import { createPingGrid } from "@/core/legs/ping-grid";
import { traceArm } from "@/core/legs/trace";
import { cleanPings } from "@/core/pings/clean";
import { columnsOf } from "../two-crossings";

const plane = planeAt(45.6, -38.3);

/** Trace of what leaves eastwards from a junction with another one so many metres east of it, without a single ping. */
function traceTowards(distanceM: number) {
  const at = (x: number) => ({ lat: latAt(plane, 0), lon: lonAt(plane, x) });
  const frame = createFrame([{ id: "A", ...at(0) }, { id: "B", ...at(distanceM) }], 1000);
  const grid = createPingGrid(cleanPings(columnsOf([])).trips, frame, 800);
  return traceArm({ junction: 0, inbound: false, bearingDeg: 90, support: 3 }, frame, grid, false);
}

describe("a traced arm", () => {
  it("ends at the box of the next junction", () => {
    const { line, meets } = traceTowards(60);
    expect(meets).toBe(1);
    expect(line[0]).toBeCloseTo(14, 3);
    expect(line[line.length - 2]).toBeCloseTo(46, 1);
  });

  it("has a length even where the next junction lies at its first point", () => {
    const { line, meets } = traceTowards(28);
    expect(meets).toBe(1);
    expect(lengthOf(line)).toBeCloseTo(5, 6);
  });
});
