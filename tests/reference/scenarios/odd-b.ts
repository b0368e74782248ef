import { strayOffsets } from "./grid";
import { StreetKit } from "./street-kit";
import type { Scenario } from "./types";

/** Two T junctions 95 m apart on opposite sides of a bent main street. */
function staggeredTs(kit: StreetKit) {
  kit.node("S1", 0, 0, "signal");
  kit.node("S2", 88, 36, "signal");
  kit.node("S1W", -360, -90, "end");
  kit.node("S1S", 60, -320, "end");
  kit.node("S2N", 40, 370, "end");
  kit.node("S2E", 430, 240, "end");
  kit.twoWay("S1W", "S1", { lanes: 2, shape: [[-240, -80], [-120, -48]] });
  kit.twoWay("S1", "S2", { lanes: 2 });
  kit.twoWay("S2", "S2E", { lanes: 2 });
  kit.twoWay("S1", "S1S", { lanes: 1 });
  kit.twoWay("S2", "S2N", { lanes: 1 });
  kit.traffic({ S1W: 560, S1S: 200, S2N: 210, S2E: 520 }, false);
}

/** A Y of three equal legs and, 260 m along one of them, a scissor crossing of 50 degrees. */
function yAndScissor(kit: StreetKit) {
  kit.node("Y", 0, 0, "signal");
  kit.node("Z", 260, 0, "signal");
  kit.node("Y1", -170, 290, "end");
  kit.node("Y2", -165, -295, "end");
  kit.node("Z1", 480, 262, "end");
  kit.node("Z2", 45, -262, "end");
  kit.node("ZE", 620, -10, "end");
  kit.twoWay("Y1", "Y");
  kit.twoWay("Y2", "Y");
  kit.twoWay("Y", "Z");
  kit.twoWay("Z1", "Z", { lanes: 1 });
  kit.twoWay("Z2", "Z", { lanes: 1 });
  kit.twoWay("Z", "ZE");
  kit.traffic({ Y1: 440, Y2: 430, Z1: 190, Z2: 190, ZE: 480 }, false);
}

/** A dual carriageway under a fly-over that runs along it, with a service road 26 m beside it. */
function flyOverAlong(kit: StreetKit) {
  kit.node("V1", 0, 0, "signal");
  kit.node("V2", 310, -20, "signal");
  kit.node("VW", -420, 30, "end");
  kit.node("VE", 740, -50, "end");
  for (const [from, to] of [["VW", "V1"], ["V1", "V2"], ["V2", "VE"]]) kit.twoWay(from, to, { medianM: 11, speedMs: 16.67 });
  for (const [id, x] of [["1", 0], ["2", 310]] as const) {
    kit.node(`V${id}N`, x + 60, 340, "end");
    kit.node(`V${id}S`, x - 35, -370, "end");
    kit.twoWay(`V${id}`, `V${id}S`, { lanes: 2 });
  }
  kit.twoWay("V2", "V2N", { lanes: 2 });
  kit.node("VJ", 14, 85, "priority");
  kit.node("VF", -330, 58, "end");
  kit.twoWay("V1", "VJ", { lanes: 2 });
  kit.twoWay("VJ", "V1N", { lanes: 2 });
  kit.twoWay("VF", "VJ", { lanes: 1, priority: 1, shape: [[-150, 46], [-40, 52]] });
  kit.traffic({ VW: 640, VE: 620, V1N: 280, V1S: 280, V2N: 280, V2S: 280, VF: 90 }, false);
  kit.node("VX1", -600, 50, "end");
  kit.node("VX2", 900, -70, "end");
  kit.twoWay("VX1", "VX2", { lanes: 2, speedMs: 22.22 });
  kit.traffic({ VX1: 900, VX2: 900 }, false);
}

/** Four one-way streets round a square. */
function oneWaySquare(kit: StreetKit) {
  const corner = (id: string, x: number, y: number) => kit.node(id, x, y, "signal");
  corner("Q1", 0, 0);
  corner("Q2", 150, 12);
  corner("Q3", 142, 140);
  corner("Q4", -8, 128);
  kit.node("QW", -330, -15, "end");
  kit.node("QS", 165, -310, "end");
  kit.node("QE", 460, 150, "end");
  kit.node("QN", -15, 440, "end");
  kit.node("QEo", 460, 25, "end");
  kit.node("QNo", 130, 440, "end");
  kit.node("QWo", -330, 118, "end");
  kit.node("QSo", 10, -310, "end");
  for (const chain of [["QW", "Q1", "Q2", "QEo"], ["QS", "Q2", "Q3", "QNo"], ["QE", "Q3", "Q4", "QWo"], ["QN", "Q4", "Q1", "QSo"]]) {
    for (let k = 0; k < 3; k++) kit.oneWay(chain[k], chain[k + 1], { lanes: 2 });
  }
  kit.traffic({ QW: 520, QS: 480, QE: 520, QN: 480 }, false);
  const demand = kit.demand[kit.demand.length - 1];
  for (const [from, to] of [["Q2", "QEo"], ["Q3", "QNo"], ["Q4", "QWo"], ["Q1", "QSo"]]) demand.exits[`${from}_${to}`] = 500;
}

export function oddBScenario(): Scenario {
  const kit = new StreetKit();
  staggeredTs(kit);
  yAndScissor(kit.at(1600, 0));
  flyOverAlong(kit.at(0, 1500));
  oneWaySquare(kit.at(1900, 1500));
  return {
    id: "odd-b",
    title: "staggered T junctions, a Y, a scissor crossing, a fly-over along a dual carriageway, a one-way square",
    driveSide: "right",
    lat: 45.55,
    lon: -38.25,
    seed: 606,
    nodes: kit.nodes,
    edges: kit.edges,
    connections: kit.links("right"),
    cycleS: 80,
    leftGreenS: 7,
    turnarounds: false,
    signals: strayOffsets(kit.nodes, 80, 61),
    demand: kit.demand,
    innerShare: 0,
    profile: [0.9, 1.1, 1],
    routeSpread: 1.2,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 0.2,
    vehicles: "calm",
  };
}
