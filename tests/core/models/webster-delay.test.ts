import { describe, expect, it } from "vitest";
import { uniformDelayS } from "@/core/models/hcm-delay";
import { shockwaveQueue } from "@/core/models/shockwave-queue";
import { uniformStopShare, websterCycleS, websterDelayS, websterShortDelayS } from "@/core/models/webster-delay";

describe("Webster (1958)", () => {
  it("gives the worked delays", () => {
    // 23.823529 + 10.000000 - 4.048314 and nine tenths of the first two; 13.636364 + 18 - 4.281540.
    expect(websterDelayS(90, 36, 0.8, 576 / 3600)).toBeCloseTo(29.775216, 5);
    expect(websterShortDelayS(90, 36, 0.8, 576 / 3600)).toBeCloseTo(30.441176, 6);
    expect(websterDelayS(60, 30, 0.9, 810 / 3600)).toBeCloseTo(27.354823, 5);
    expect(websterShortDelayS(60, 30, 0.9, 810 / 3600)).toBeCloseTo(28.472727, 6);
  });

  it("gives the cycle of least delay", () => {
    expect(websterCycleS(12, 0.7)).toBeCloseTo(76.666667, 6);
    expect(websterCycleS(10, 0.7)).toBeCloseTo(66.666667, 6);
    expect(websterCycleS(16, 0.85)).toBeCloseTo(193.33, 2);
  });

  it("gives the share that stops under uniform arrivals", () => expect(uniformStopShare(0.4, 0.8)).toBeCloseTo(0.882353, 6));

  it("refuses saturation", () => expect(() => websterDelayS(90, 36, 1, 0.2)).toThrow(RangeError));
});

describe("shockwaveQueue (Lighthill and Whitham 1955; Newell 1993)", () => {
  const diagram = { freeSpeedKmh: 50, waveSpeedKmh: 18, jamVehKm: 150 };

  // Triangular diagram evaluated by hand: red 45 s.
  it.each([
    [400, 2.816901, 53.348794, 41.74397, 6.261596, 56.35436, 140.8859],
    [600, 4.347826, 59.33121, 71.656051, 10.748408, 64.490446, 241.839172],
    [900, 6.818182, 72.439024, 137.195122, 20.579268, 82.317073, 463.033537],
  ])("of %d veh/h", (q, growthKmh, longestAtS, longestM, stopped, clearAtS, delayVehS) => {
    const queue = shockwaveQueue(diagram, 45, q);
    expect(queue.criticalVehKm).toBeCloseTo(39.705882, 6);
    expect(queue.capacityVph).toBeCloseTo(1985.294118, 6);
    expect(queue).toMatchObject({
      growthKmh: expect.closeTo(growthKmh, 6),
      longestAtS: expect.closeTo(longestAtS, 5),
      longestM: expect.closeTo(longestM, 5),
      stopped: expect.closeTo(stopped, 5),
      clearAtS: expect.closeTo(clearAtS, 5),
      delayVehS: expect.closeTo(delayVehS, 5),
    });
  });

  it("delays each vehicle as the handbook's uniform term does", () => {
    const queue = shockwaveQueue(diagram, 45, 600);
    const x = 600 / (queue.capacityVph * 0.5);
    expect(queue.delayVehS / 15).toBeCloseTo(uniformDelayS(90, 45, x), 6);
  });

  it("refuses more than the road can carry", () => expect(() => shockwaveQueue(diagram, 45, 2000)).toThrow(RangeError));
});
