import type { Turn } from "@/core/types";

import { createPlane, latFromY, lonFromX } from "../plane";
import type { Plane } from "../plane";
import { hashUnit } from "../random";
import type { Scenario } from "../scenarios/types";
import type { SimulatedNetwork } from "../simulator/read-network";
import type { Course } from "../simulator/read-trajectories";
import { movementKey } from "./reference-times";
import type { RawPassage } from "./passages";
import { GAP_ALL_M, GAP_SAMPLE_M, tailsBySecond } from "./queues";
import { middleLane } from "./street-legs";
import type { LegStreet } from "./street-legs";
import { intervalNames, round, summarisePassages, summariseTails } from "./summarise";
import type { Passage, TrueLeg, Truth } from "./types";

/** A city's list of junctions is some metres off; so is ours. */
const JUNCTION_ERROR_M = 4;

export interface Measured {
  scenario: Scenario;
  network: SimulatedNetwork;
  legs: LegStreet[];
  courses: Map<string, Course>;
  passages: RawPassage[];
  referenceS: Map<string, number>;
  startMs: number;
}

/** Figures of all legs and movements from the vehicles that `isSeen` lets pass: all for the truth, the sampled for the oracle. */
export function measureTruth(measured: Measured, isSeen: (vehicleId: string) => boolean, everyone: boolean): Truth {
  const { scenario, legs, startMs } = measured;
  const plane = createPlane(scenario.lat, scenario.lon);
  const names = intervalNames(startMs, scenario.recordedS);
  const seen = [...measured.courses.values()].filter((course) => isSeen(course.id));
  const tails = tailsBySecond(seen, legs, scenario.recordedS, everyone ? GAP_ALL_M : GAP_SAMPLE_M);
  const byLeg = groupByLeg(measured.passages.filter((passage) => passage.isComplete && isSeen(passage.vehicleId)));
  return {
    scenario: scenario.id,
    title: scenario.title,
    driveSide: scenario.driveSide,
    origin: { lat: scenario.lat, lon: scenario.lon },
    startMs,
    endMs: startMs + scenario.recordedS * 1000,
    junctions: listJunctions(scenario, plane),
    legs: legs.map((leg, i) => ({
      ...describeLeg(leg, plane),
      figures: summariseTails(tails[i], leg.storageM, names),
      movements: measureMovements(measured, byLeg.get(leg) ?? [], names),
    })),
  };
}

function groupByLeg(passages: RawPassage[]): Map<LegStreet, RawPassage[]> {
  const groups = new Map<LegStreet, RawPassage[]>();
  for (const passage of passages) {
    const group = groups.get(passage.leg);
    if (group) group.push(passage);
    else groups.set(passage.leg, [passage]);
  }
  return groups;
}

function listJunctions(scenario: Scenario, plane: Plane): Truth["junctions"] {
  return scenario.nodes
    .filter((node) => node.kind === "signal")
    .map((node) => {
      const dx = (hashUnit(`${scenario.id} ${node.id} x`) * 2 - 1) * JUNCTION_ERROR_M;
      const dy = (hashUnit(`${scenario.id} ${node.id} y`) * 2 - 1) * JUNCTION_ERROR_M;
      return {
        id: node.id,
        name: node.name ?? `Junction ${node.id}`,
        lat: round(latFromY(plane, node.y + dy), 6),
        lon: round(lonFromX(plane, node.x + dx), 6),
      };
    });
}

function describeLeg(leg: LegStreet, plane: Plane): Omit<TrueLeg, "figures" | "movements"> {
  const centreline: [number, number][] = [];
  for (const edge of leg.chain) {
    const shape = middleLane(edge);
    for (let i = shape.length - 2; i >= 0; i -= 2) {
      centreline.push([round(latFromY(plane, shape[i + 1]), 7), round(lonFromX(plane, shape[i]), 7)]);
    }
  }
  return {
    junctionId: leg.junctionId,
    edge: leg.chain[0].id,
    bearingDeg: round(leg.bearingDeg, 2),
    storageM: leg.storageM === null ? null : round(leg.storageM, 1),
    upstreamJunctionId: leg.upstreamJunctionId,
    cordonUpM: round(leg.cordonUpM, 1),
    centreline,
  };
}

function measureMovements(measured: Measured, passages: RawPassage[], names: string[]): TrueLeg["movements"] {
  const turns = [...new Set(passages.map((passage) => passage.exit.turn))].sort();
  return turns.map((turn) => {
    const own = passages.filter((passage) => passage.exit.turn === turn);
    const exits = [...new Set(own.map((passage) => passage.exit))];
    return {
      turn,
      exits: exits.map((exit) => ({
        edge: exit.edge.id,
        bearingDeg: round(exit.bearingDeg, 2),
        signedDeg: round(exit.signedDeg, 1),
        referenceS: round(measured.referenceS.get(`${passages[0].leg.chain[0].id}>${exit.edge.id}`) ?? Number.NaN, 2),
      })),
      figures: summarisePassages(
        own.map((passage) => ({ stopLineS: passage.stopLineS, delayS: delayOf(measured, passage), stops: passage.stops })),
        names,
      ),
    };
  });
}

function delayOf(measured: Measured, passage: RawPassage): number {
  return passage.exitS - passage.enterS - (measured.referenceS.get(movementKey(passage)) ?? Number.NaN);
}

/** The true passages of the sampled vehicles, for turn and count scores. */
export function listPassages(measured: Measured, isSeen: (vehicleId: string) => boolean): Passage[] {
  const ms = (seconds: number) => measured.startMs + Math.round(seconds * 1000);
  return measured.passages
    .filter((passage) => isSeen(passage.vehicleId))
    .map((passage) => ({
      vehicleId: passage.vehicleId,
      junctionId: passage.leg.junctionId,
      approachBearingDeg: round(passage.leg.bearingDeg, 1),
      turn: passage.exit.turn as Turn,
      enterMs: ms(passage.enterS),
      stopLineMs: ms(passage.stopLineS),
      exitMs: ms(passage.exitS),
      delayS: passage.isComplete ? round(delayOf(measured, passage), 2) : null,
      stops: passage.stops,
      isComplete: passage.isComplete,
    }));
}
