import { describe, expect, it } from "vitest";
import { createNearSampler, decodeNearPings, encodeNearPings, joinNearSamples } from "@/core/pings/near-sample";
import type { PingColumns } from "@/core/types";
import { createH3Index } from "@/geo/h3-index";

const JUNCTION = { id: "A", lat: 45.6, lon: -38.3 };
// 0.001 degrees of latitude are 111.14 m at 45.6 N (WGS 84, 111,143.5 m for a degree).
const STEP_DEG = 0.001;

/** One ping a second, from `fromS` on. */
function pingsAt(lats: number[], headingDeg: number, speedMs: number, fromS = 0): PingColumns {
  const length = lats.length;
  return {
    length,
    vehicle: new Uint32Array(length),
    tMs: Float64Array.from(lats, (_, i) => (fromS + i) * 1000),
    lat: Float64Array.from(lats),
    lon: new Float64Array(length).fill(JUNCTION.lon),
    speedMs: new Float32Array(length).fill(speedMs),
    headingDeg: new Float32Array(length).fill(headingDeg),
  };
}

describe("sample of pings near a junction", () => {
  it("keeps what lies within the radius, in metres from the junction", () => {
    const sampler = createNearSampler([JUNCTION], createH3Index());
    sampler.add(pingsAt([JUNCTION.lat + STEP_DEG, JUNCTION.lat + 2 * STEP_DEG], 90, 10));
    const [near] = sampler.finish();
    expect(near.length).toBe(1);
    expect(near.eastM[0]).toBeCloseTo(0, 3);
    expect(near.northM[0]).toBeCloseTo(111.14, 1);
  });

  it("keeps no more than it may, from all parts of the stream", () => {
    const sampler = createNearSampler([JUNCTION], createH3Index(), { most: 100 });
    for (let part = 0; part < 10; part++) sampler.add(pingsAt(Array(1000).fill(JUNCTION.lat), NaN, part, part * 1000));
    const near = joinNearSamples([sampler.finish()[0]], 100);
    expect(near.length).toBe(100);
    const fromEachPart = Array.from({ length: 10 }, (_, part) => near.speedMs.filter((speed) => speed === part).length);
    // Ten of a hundred are expected from each part; beyond 10 ± 9 lies less than one in a hundred seeds.
    for (const n of fromEachPart) expect(Math.abs(n - 10)).toBeLessThan(10);
  });

  it("is the same whoever saw which pings in which order", () => {
    const index = createH3Index();
    const whole = createNearSampler([JUNCTION], index, { most: 100 });
    const first = createNearSampler([JUNCTION], index, { most: 100 });
    const second = createNearSampler([JUNCTION], index, { most: 100 });
    for (let part = 0; part < 10; part++) {
      const batch = pingsAt(Array(300).fill(JUNCTION.lat), part, part, part * 300);
      whole.add(batch);
      (part % 2 === 0 ? second : first).add(batch);
    }
    const joined = joinNearSamples([second.finish()[0], first.finish()[0]], 100);
    expect(joined).toEqual(joinNearSamples(whole.finish(), 100));
    expect([...joined.priority]).toEqual([...joined.priority].sort((a, b) => a - b));
  });

  it("may leave out vehicles by their numbers", () => {
    const sampler = createNearSampler([JUNCTION], createH3Index());
    const pings = pingsAt([JUNCTION.lat, JUNCTION.lat, JUNCTION.lat], NaN, NaN);
    pings.vehicle.set([0, 1, 2]);
    sampler.add(pings, 2);
    expect(sampler.finish()[0].length).toBe(2);
  });

  it("comes back from its bytes to a decimetre, a degree and a half and a quarter of a metre a second", () => {
    const sampler = createNearSampler([JUNCTION], createH3Index());
    sampler.add(pingsAt([JUNCTION.lat - STEP_DEG], 359.9, 13.9));
    sampler.add(pingsAt([JUNCTION.lat], NaN, NaN));
    const back = decodeNearPings(encodeNearPings(sampler.finish()[0]));
    expect(back.length).toBe(2);
    // In the order of their hashes.
    const [south, here] = back.northM[0] < back.northM[1] ? [0, 1] : [1, 0];
    expect(back.northM[south]).toBeCloseTo(-111.1, 1);
    expect(back.headingDeg[south]).toBe(0);
    expect(back.speedMs[south]).toBe(14);
    expect([back.headingDeg[here], back.speedMs[here]]).toEqual([NaN, NaN]);
    expect(() => decodeNearPings(new Uint8Array([1, 0, 0, 0, 9]))).toThrow(TypeError);
  });
});
