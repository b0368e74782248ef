import { describe, expect, it } from "vitest";
import { createScenario } from "@seed/scenario";
import { REACTION_S } from "@seed/simulation/lanes";
import { placeTimesInto } from "@seed/simulation/path-times";
import { RING, RING_MASK, type LaneState } from "@seed/simulation/state";
import { YELLOW_S } from "@seed/signals/timing";
import { runPmPeak } from "./simulated-window";

const scenario = createScenario("small");

/** A lane of ten places of 7 m at 14 m/s, with given entries and exits: half a second for each place. */
function laneWith(entryS: number[], exitS: number[]): LaneState {
  const lane = {
    places: Int32Array.of(10), spacingM: Float64Array.of(7), speedMs: Float64Array.of(14),
    entryS: new Float64Array(RING), exitS: new Float64Array(RING).fill(-1e9), vehicle: new Int32Array(RING),
  };
  lane.entryS.set(entryS);
  lane.exitS.set(exitS);
  lane.vehicle.set(entryS.map((_, i) => i));
  return lane as unknown as LaneState;
}

describe("Newell's paths", () => {
  it("drive freely from entry to exit when nothing is in the way", () => {
    const times = new Float64Array(RING);
    expect(placeTimesInto(laneWith([100], [105]), 0, 0, () => 1, times)).toBe(false);
    expect([times[10], times[0]]).toEqual([100, 105]);
  });

  it("stand where the vehicle ahead stood one place on, and start one reaction time later", () => {
    // The first waits at the line until 130; the second drives up behind it, stands at place 1 until 131.5 and crosses at 132.
    const lane = laneWith([100, 102], [130, 132]);
    const times = new Float64Array(RING);
    placeTimesInto(lane, 0, 1, () => 1, times);
    expect(times[2]).toBe(102 + 8 * 0.5);
    expect(times[1]).toBe(130 + REACTION_S);
    expect(times[0]).toBe(132);
  });

  it("carry a wave back at one place each reaction time: 7 m in 1.5 s, 16.8 km/h", () => {
    const lane = laneWith([100, 102, 104, 106], [130, 132, 134, 136]);
    const times = new Float64Array(RING);
    const starts = [1, 2, 3].map((vehicle) => {
      placeTimesInto(lane, 0, vehicle, () => 1, times);
      return times[vehicle];
    });
    expect(starts).toEqual([131.5, 133, 134.5]);
    expect((7 / REACTION_S) * 3.6).toBeCloseTo(16.8, 10);
  });

  it("hold a quick driver behind a slow one for the whole way", () => {
    const lane = laneWith([100, 101.9], [110, 112]);
    const times = new Float64Array(RING);
    placeTimesInto(lane, 0, 1, (trip) => (trip === 0 ? 0.5 : 1), times);
    const slow = (place: number) => 100 + (10 - place) * 1;
    for (let place = 9; place >= 2; place--) expect(times[place]).toBeGreaterThanOrEqual(slow(place - 1) + REACTION_S - 1e-9);
  });
});

describe("every vehicle of a peak in the small city", () => {
  const timesBefore = new Map<number, { vehicle: number; times: Float64Array }>();
  const lastExitS = new Map<number, number>();
  let pairs = 0;
  let tooClose = 0;
  let backwards = 0;
  let outOfOrder = 0;
  let onRed = 0;
  let crossings = 0;
  let overfull = 0;
  const { city, plans, map } = scenario;

  const { result, trips } = runPmPeak(scenario, (trips, lanes, { lane, place, exitS, movement }) => {
    const places = lanes.places[lane];
    const times = new Float64Array(places + 1);
    const out = new Float64Array(RING);
    const isHeld = placeTimesInto(lanes, lane, place, (trip) => trips.pace[trip], out);
    const stepS = lanes.spacingM[lane] / lanes.speedMs[lane];
    for (let j = 0; j <= places; j++) times[j] = isHeld ? out[j] : out[0] - (j * (out[0] - out[places])) / places;
    for (let j = 0; j < places; j++) if (times[j] < times[j + 1] + stepS - 1e-6) backwards++;
    const before = timesBefore.get(lane);
    if (before && before.vehicle === place - 1) {
      pairs++;
      for (let j = places; j >= 1; j--) if (times[j] < before.times[j - 1] + REACTION_S - 1e-6) tooClose++;
    }
    timesBefore.set(lane, { vehicle: place, times });
    if (exitS < (lastExitS.get(lane) ?? -1)) outOfOrder++;
    lastExitS.set(lane, exitS);
    if (lanes.entered[lane] - lanes.left[lane] > places) overfull++;
    const entryS = lanes.entryS[lane * RING + (place & RING_MASK)];
    expect(exitS).toBeGreaterThan(entryS);
    if (movement < 0) return;
    crossings++;
    const plan = plans.pm;
    const node = city.movements[movement].node;
    const inCycle = (((exitS - plan.offsetS[node]) % plan.cycleS[node]) + plan.cycleS[node]) % plan.cycleS[node];
    const [from, until] = Number.isNaN(plan.greenStartS[movement])
      ? [plan.permitStartS[movement], plan.permitEndS[movement] + YELLOW_S]
      : [plan.greenStartS[movement], plan.greenEndS[movement]];
    if (!(inCycle >= from - 1e-6 && inCycle < until + 1e-6)) onRed++;
  });

  it("keeps a place and a reaction time behind the one ahead: nobody overlaps or overtakes in a lane", () => {
    expect(pairs).toBeGreaterThan(50_000);
    expect({ tooClose, outOfOrder, backwards }).toEqual({ tooClose: 0, outOfOrder: 0, backwards: 0 });
  });

  it("crosses the stop line on green, or on yellow after waiting for a gap", () => {
    expect(crossings).toBeGreaterThan(20_000);
    expect(onRed).toBe(0);
  });

  it("never puts more vehicles into a lane than it has places", () => {
    expect(overfull).toBe(0);
    for (const lane of map.lanes) expect(result.lanes.entered[lane.index] - result.lanes.left[lane.index]).toBeLessThanOrEqual(lane.places);
  });

  it("loses nobody: those who started have finished or are still in a lane", () => {
    const inside = map.lanes.reduce((sum, lane) => sum + result.lanes.entered[lane.index] - result.lanes.left[lane.index], 0);
    expect(result.started).toBe(result.finished + inside);
    expect(trips.length).toBe(result.started + result.keptOut);
    expect(result.gaveUp).toBeLessThan(0.001 * result.started);
  });
});
