import { describe, expect, it } from "vitest";
import { buildCity } from "@seed/network/build-city";
import { legByBearing, nodeById, PLANTED, type FaultKind } from "@seed/planted";
import { createScenario } from "@seed/scenario";
import { compilePlan, planSignals } from "@seed/signals/plan";
import { meanDelayS, runPmPeak } from "./simulated-window";

describe.each(["demo", "small"] as const)("the problems planted in the %s city", (scale) => {
  const city = buildCity(scale);

  it("are one of each kind, at junctions and legs that exist", () => {
    const kinds: FaultKind[] = ["starved-left", "bad-offset", "spillback-chain", "oversaturated", "noisy"];
    expect(PLANTED[scale].map((problem) => problem.kind).sort()).toEqual(kinds.sort());
    for (const problem of PLANTED[scale]) {
      const node = nodeById(city, problem.junctionId);
      expect(city.nodes[node].isGate).toBe(false);
      if (problem.turn === "all") continue;
      const leg = legByBearing(city, node, problem.approachBearingDeg);
      expect(city.movementsOf[leg].map((m) => city.movements[m].turn)).toContain(problem.turn);
    }
  });

  it("has the queue's junctions behind each other along one street", () => {
    const chain = PLANTED[scale].find((problem) => problem.kind === "spillback-chain");
    const ids = [chain?.junctionId ?? "", ...(chain?.upstreamIds ?? [])];
    expect(ids.length).toBe(3);
    for (let i = 1; i < ids.length; i++) {
      const [ahead, behind] = [nodeById(city, ids[i - 1]), nodeById(city, ids[i])];
      expect(city.links.some((link) => link.from === behind && link.to === ahead && link.street === "Harbour Road")).toBe(true);
    }
  });
});

describe("a PM peak of the small city, every vehicle counted", () => {
  const scenario = createScenario("small");
  const { city, demand } = scenario;
  const withFaults = runPmPeak(scenario).truth;
  const sound = { ...scenario, plans: { ...scenario.plans, pm: compilePlan(city, planSignals(city, demand.flows.pm)) } };
  const withoutFaults = runPmPeak(sound).truth;
  const planted = (kind: FaultKind) => {
    const problem = PLANTED.small.find((candidate) => candidate.kind === kind);
    if (!problem) throw new Error(`No ${kind} is planted.`);
    return problem;
  };
  const movementsOf = (kind: FaultKind, turn?: string) => {
    const problem = planted(kind);
    const node = nodeById(city, problem.junctionId);
    const legs = Number.isNaN(problem.approachBearingDeg) ? city.nodes[node].inbound : [legByBearing(city, node, problem.approachBearingDeg)];
    return legs.flatMap((leg) => city.movementsOf[leg]).filter((m) => turn === undefined || city.movements[m].turn === turn);
  };

  it("delays the starved left turn, and less the through movement beside it", () => {
    const left = meanDelayS(withFaults, movementsOf("starved-left", "left"));
    expect(left).toBeGreaterThan(50);
    expect(left).toBeGreaterThan(1.3 * meanDelayS(withoutFaults, movementsOf("starved-left", "left")));
    expect(left).toBeGreaterThan(1.3 * meanDelayS(withFaults, movementsOf("starved-left", "through")));
  });

  it("makes platoons wait at the junction with the bad offset", () => {
    const through = movementsOf("bad-offset", "through");
    expect(meanDelayS(withFaults, through)).toBeGreaterThan(22);
    expect(meanDelayS(withoutFaults, through)).toBeLessThan(14);
  });

  it("holds vehicles up behind a full street at the junctions of the chain, and hardly so without the fault", () => {
    const problem = planted("spillback-chain");
    const heldS = (truth: typeof withFaults) =>
      (problem.upstreamIds ?? []).map((id) => {
        const leg = legByBearing(city, nodeById(city, id), problem.approachBearingDeg);
        return truth.blockedS.subarray(leg * truth.bins, (leg + 1) * truth.bins).reduce((sum, value) => sum + value, 0);
      });
    const [near, far] = heldS(withFaults);
    expect(near).toBeGreaterThan(1200);
    expect(far).toBeGreaterThan(300);
    for (const value of heldS(withoutFaults)) expect(value).toBeLessThan(60);
  });

  it("delays the vehicles of the oversaturated junction beyond 50 s on average", () => {
    expect(meanDelayS(withFaults, movementsOf("oversaturated"))).toBeGreaterThan(50);
    expect(meanDelayS(withoutFaults, movementsOf("oversaturated"))).toBeLessThan(25);
  });

  it("leaves the noisy junction fine and little used", () => {
    const movements = movementsOf("noisy");
    expect(meanDelayS(withFaults, movements)).toBeLessThan(35);
    const seen = movements.reduce((sum, m) => sum + withFaults.vehicles.subarray(m * withFaults.bins, (m + 1) * withFaults.bins).reduce((a, b) => a + b, 0), 0);
    expect(seen).toBeLessThan(300);
  });

  it("leaves the rest of the city at ordinary delays: half of the junctions between 8 and 35 s, none of the sound ones above 80 s", () => {
    const delays = city.nodes
      .filter((node) => !node.isGate)
      .map((node) => meanDelayS(withoutFaults, node.inbound.flatMap((link) => city.movementsOf[link])))
      .sort((a, b) => a - b);
    const middle = delays[delays.length >> 1];
    expect(middle).toBeGreaterThan(8);
    expect(middle).toBeLessThan(35);
    expect(delays[delays.length - 1]).toBeLessThan(80);
  });
});
