import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { lengthOf } from "@/core/geometry/polyline";
import { followTraffic } from "@/core/legs/follow-traffic";
import { createFrame } from "@/core/legs/frame";
import { createPingGrid } from "@/core/legs/ping-grid";
import { cleanPings } from "@/core/pings/clean";
import { columnsOf } from "../two-crossings";

const plane = planeAt(45.6, -38.3);
const at = (x: number, y: number) => ({ lat: latAt(plane, y), lon: lonAt(plane, x) });
const frame = createFrame([{ id: "A", ...at(0, 0) }, { id: "B", ...at(-400, 120) }], 1000);

/** A southbound arm that was traced straight up north for 300 m. */
const arm = { junction: 0, inbound: true, support: 6, line: [0, 14, 0, 314], meets: -1 };

/** A vehicle every five seconds at 10 m/s: from the west along y = 120 round the corner and south, or straight from the north. */
function drive(vehicle: number, way: "corner" | "straight", shiftM: number): number[][] {
  const rows: number[][] = [];
  for (let n = 0; n <= 6; n++) {
    const left = 320 - 50 * n - shiftM;
    const onCorner = way === "corner" && left > 120;
    const [x, y, heading] = onCorner ? [-(left - 120), 120, 90] : [0, left, 180];
    rows.push([vehicle, 5000 * n, at(x, y).lat, at(x, y).lon, 10, heading]);
  }
  return rows;
}

function follow(...ways: ("corner" | "straight")[]) {
  const rows = ways.flatMap((way, vehicle) => drive(vehicle, way, vehicle * 7));
  return followTraffic(arm, frame, createPingGrid(cleanPings(columnsOf(rows)).trips, frame, 800));
}

describe("an arm and its traffic", () => {
  it("goes round the corner where all of it comes from there", () => {
    const { line } = follow("corner", "corner", "corner", "corner");
    const [x, y] = line.slice(-2);
    expect(y).toBeCloseTo(120, -1);
    expect(x).toBeLessThan(-100);
    expect(lengthOf(Float64Array.from(line))).toBeGreaterThan(200);
  });

  it("stays straight while anybody comes that way, and for two vehicles", () => {
    expect(follow("corner", "corner", "corner", "straight").line).toEqual(arm.line);
    expect(follow("corner", "corner").line).toEqual(arm.line);
  });
});
