import { strayOffsets } from "./grid";
import { StreetKit } from "./street-kit";
import type { Scenario } from "./types";

/** Two dual carriageways cross: four signals 34 m apart under one controller, with short approaches between them. */
function fourInOne(kit: StreetKit) {
  const halfM = 17;
  for (const [id, x, y] of [["C1", -halfM, -halfM], ["C2", halfM, -halfM], ["C3", halfM, halfM], ["C4", -halfM, halfM]] as const) {
    kit.node(id, x, y, "signal", "C");
  }
  const ends: [string, number, number][] = [
    ["CWi", -420, -halfM], ["CEo", 420, -halfM], ["CEi", 420, halfM], ["CWo", -420, halfM],
    ["CSi", halfM, -420], ["CNo", halfM, 420], ["CNi", -halfM, 420], ["CSo", -halfM, -420],
  ];
  for (const [id, x, y] of ends) kit.node(id, x, y, "end");
  for (const chain of [["CWi", "C1", "C2", "CEo"], ["CEi", "C3", "C4", "CWo"], ["CSi", "C2", "C3", "CNo"], ["CNi", "C4", "C1", "CSo"]]) {
    for (let k = 0; k < 3; k++) kit.oneWay(chain[k], chain[k + 1], { lanes: 2 });
  }
  kit.traffic({ CWi: 430, CEi: 410, CSi: 340, CNi: 350 }, false);
  const demand = kit.demand[kit.demand.length - 1];
  for (const [from, to] of [["C2", "CEo"], ["C4", "CWo"], ["C3", "CNo"], ["C1", "CSo"]]) demand.exits[`${from}_${to}`] = 500;
}

/** Crossings 50 m apart on a main street, and another 140 m on. */
function threeInARow(kit: StreetKit) {
  for (const [id, x] of [["P1", 0], ["P2", 50], ["P3", 190]] as const) {
    kit.node(id, x, x / 10, "signal");
    kit.node(`${id}N`, x + 20, 320, "end");
    kit.node(`${id}S`, x - 15, -310, "end");
  }
  kit.node("PW", -400, -40, "end");
  kit.node("PE", 590, 70, "end");
  for (const [from, to] of [["PW", "P1"], ["P1", "P2"], ["P2", "P3"], ["P3", "PE"]]) kit.twoWay(from, to);
  kit.twoWay("P1", "P1N", { lanes: 1 });
  kit.twoWay("P2", "P2S", { lanes: 1 });
  kit.twoWay("P3", "P3N", { lanes: 1 });
  kit.twoWay("P3", "P3S", { lanes: 1 });
  kit.traffic({ PW: 560, PE: 520, P1N: 170, P2S: 170, P3N: 150, P3S: 150 }, false);
}

/** A diamond interchange: ramps of a motorway meet a street at two signals 130 m apart, the motorway passes between. */
function diamond(kit: StreetKit) {
  kit.node("I1", -65, 0, "signal");
  kit.node("I2", 65, 0, "signal");
  kit.node("IW", -450, 20, "end");
  kit.node("IE", 460, -15, "end");
  kit.twoWay("IW", "I1");
  kit.twoWay("I1", "I2");
  kit.twoWay("I2", "IE");
  const ends: [string, number, number][] = [["IR1", -40, 420], ["IR1o", -35, -420], ["IR2", 40, -420], ["IR2o", 35, 420]];
  for (const [id, x, y] of ends) kit.node(id, x, y, "end");
  kit.oneWay("IR1", "I1", { lanes: 2, shape: [[-46, 250], [-62, 120]] });
  kit.oneWay("I1", "IR1o", { lanes: 1, shape: [[-62, -120], [-46, -250]] });
  kit.oneWay("IR2", "I2", { lanes: 2, shape: [[46, -250], [62, -120]] });
  kit.oneWay("I2", "IR2o", { lanes: 1, shape: [[62, 120], [46, 250]] });
  kit.traffic({ IW: 460, IE: 440, IR1: 420, IR2: 410 }, false);
  const demand = kit.demand[kit.demand.length - 1];
  Object.assign(demand.exits, { I1_IR1o: 400, I2_IR2o: 400 });
  kit.node("IX1", -8, 700, "end");
  kit.node("IX2", 8, -700, "end");
  kit.twoWay("IX1", "IX2", { lanes: 2, speedMs: 25, medianM: 6 });
  kit.traffic({ IX1: 900, IX2: 900 }, false);
}

export function compoundScenario(): Scenario {
  const kit = new StreetKit();
  fourInOne(kit);
  threeInARow(kit.at(1600, 0));
  diamond(kit.at(0, 1900));
  return {
    id: "compound",
    title: "four signals of two crossing dual carriageways, crossings 50 m apart, a diamond interchange under a motorway",
    driveSide: "right",
    lat: 45.63,
    lon: -38.35,
    seed: 1111,
    nodes: kit.nodes,
    edges: kit.edges,
    connections: kit.links("right"),
    cycleS: 84,
    leftGreenS: 7,
    turnarounds: false,
    signals: strayOffsets(kit.nodes.filter((node) => node.controller === undefined), 84, 71),
    demand: kit.demand,
    innerShare: 0,
    profile: [0.9, 1.1, 1],
    routeSpread: 1.1,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 1,
    vehicles: "default",
  };
}
