import { strayOffsets } from "./grid";
import { StreetKit } from "./street-kit";
import type { Scenario } from "./types";

/** A T and, 80 m on, a crossing: queues of one reach into the other. */
function closePair(kit: StreetKit) {
  kit.node("T1", 0, 0, "signal");
  kit.node("T2", 80, 6, "signal");
  kit.node("T1W", -380, -20, "end");
  kit.node("T1S", 10, -330, "end");
  kit.node("T2N", 70, 340, "end");
  kit.node("T2S", 95, -320, "end");
  kit.node("T2E", 470, 30, "end");
  kit.twoWay("T1W", "T1");
  kit.twoWay("T1", "T2", { lanes: 2 });
  kit.twoWay("T2", "T2E");
  kit.twoWay("T1", "T1S", { lanes: 1 });
  kit.twoWay("T2", "T2N");
  kit.twoWay("T2", "T2S");
  kit.traffic({ T1W: 620, T1S: 220, T2N: 380, T2S: 300, T2E: 560 }, false);
}

/** Five legs, two of them 45 degrees apart, one coming in round a bend. */
function fiveLegs(kit: StreetKit) {
  kit.node("F", 0, 0, "signal");
  const leg = (id: string, bearing: number, lengthM: number) =>
    kit.node(id, lengthM * Math.sin((bearing * Math.PI) / 180), lengthM * Math.cos((bearing * Math.PI) / 180), "end");
  leg("F0", 5, 340);
  leg("F1", 50, 360);
  leg("F2", 120, 330);
  leg("F3", 190, 350);
  kit.node("F4", -300, -190, "end");
  for (const id of ["F0", "F1", "F2", "F3"]) kit.twoWay(id, "F", { lanes: id === "F1" ? 1 : 2 });
  kit.twoWay("F4", "F", { shape: [[-290, -110], [-255, -50], [-205, -12], [-150, 8], [-90, 14], [-45, 10]] });
  kit.traffic({ F0: 330, F1: 190, F2: 330, F3: 330, F4: 360 }, false);
}

/** Two one-way streets in opposite directions across two two-way ones. */
function oneWayPair(kit: StreetKit) {
  const id = (row: number, column: number) => `O${row}${column}`;
  for (const row of [0, 1]) for (const column of [0, 1, 2]) kit.node(id(row, column), [0, 190, 330][column], row * 110, "signal");
  for (const column of [0, 1, 2]) {
    kit.node(`OS${column}`, [0, 190, 330][column] + 10, -310, "end");
    kit.node(`ON${column}`, [0, 190, 330][column] - 15, 420, "end");
    const lanes = column === 1 ? 2 : 1;
    kit.twoWay(`OS${column}`, id(0, column), { lanes });
    kit.twoWay(id(0, column), id(1, column), { lanes });
    kit.twoWay(id(1, column), `ON${column}`, { lanes });
  }
  for (const [row, order] of [[0, ["OWA", id(0, 0), id(0, 1), id(0, 2), "OEA"]], [1, ["OEB", id(1, 2), id(1, 1), id(1, 0), "OWB"]]] as const) {
    kit.node(row === 0 ? "OWA" : "OWB", -320, row * 110, "end");
    kit.node(row === 0 ? "OEA" : "OEB", 650, row * 110, "end");
    for (let k = 0; k < 4; k++) kit.oneWay(order[k], order[k + 1], { lanes: 3 });
  }
  kit.traffic({ OWA: 900, OEB: 850, OEA: 0, OWB: 0, OS0: 130, OS1: 280, OS2: 130, ON0: 130, ON1: 280, ON2: 130 }, true);
  const demand = kit.demand[kit.demand.length - 1];
  demand.exits = { ...demand.exits, [`${id(0, 2)}_OEA`]: 900, [`${id(1, 0)}_OWB`]: 850 };
}

/** Carriageways 22 m apart, with a fly-over across the junction and a frontage road beside one leg. */
function dualCarriageway(kit: StreetKit) {
  kit.node("D1", 0, 0, "signal");
  kit.node("D2", 520, 30, "signal");
  kit.node("DW", -430, -25, "end");
  kit.node("DE", 950, 55, "end");
  kit.twoWay("DW", "D1", { medianM: 8, speedMs: 16.67 });
  kit.twoWay("D1", "D2", { medianM: 8, speedMs: 16.67 });
  kit.twoWay("D2", "DE", { medianM: 8, speedMs: 16.67 });
  for (const [id, x] of [["1", 0], ["2", 520]] as const) {
    kit.node(`D${id}N`, x - 40, 350, "end");
    kit.node(`D${id}S`, x + 30, -340, "end");
    kit.twoWay(`D${id}`, `D${id}S`, { lanes: 2 });
  }
  kit.twoWay("D1", "D1N", { lanes: 2 });
  // The frontage road runs 24 m beside the main street and joins the northern side street of D2, 70 m from it.
  kit.node("DJ", 512, 100, "priority");
  kit.node("DF", 120, 42, "end");
  kit.twoWay("D2", "DJ", { lanes: 2 });
  kit.twoWay("DJ", "D2N", { lanes: 2 });
  kit.twoWay("DF", "DJ", { lanes: 1, priority: 1, shape: [[180, 44], [430, 58], [480, 80]] });
  kit.node("DX1", -330, -290, "end");
  kit.node("DX2", 340, 290, "end");
  kit.traffic({ DW: 800, DE: 760, D1N: 330, D1S: 300, D2N: 330, D2S: 300, DF: 110 }, false);
  kit.twoWay("DX1", "DX2", { lanes: 2, speedMs: 22.22 });
  kit.traffic({ DX1: 800, DX2: 800 }, false);
}

export function oddScenario(): Scenario {
  const kit = new StreetKit();
  closePair(kit);
  fiveLegs(kit.at(1700, 0));
  oneWayPair(kit.at(0, 1500));
  dualCarriageway(kit.at(1700, 1500));
  return {
    id: "odd",
    title: "a T 80 m from a crossing, five legs with a curved one, a one-way pair, a dual carriageway with fly-over and frontage road",
    driveSide: "right",
    lat: 45.58,
    lon: -38.33,
    seed: 303,
    nodes: kit.nodes,
    edges: kit.edges,
    connections: kit.links("right"),
    cycleS: 96,
    leftGreenS: 8,
    turnarounds: false,
    signals: strayOffsets(kit.nodes, 96, 31),
    demand: kit.demand,
    innerShare: 0.06,
    profile: [0.9, 1.1, 1],
    routeSpread: 1.2,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 0.2,
    vehicles: "default",
  };
}
