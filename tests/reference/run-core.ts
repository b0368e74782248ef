import { processCity } from "@/core/process";
import { legQuarters } from "@/core/queues/leg-quarters";
import { screenRows } from "@/core/scores/screen-rows";
import type { Network, OpenTracks, PingColumns, Traversals } from "@/core/types";
import { createH3Index } from "@/geo/h3-index";

import { createPlane } from "./plane";
import type { Recording } from "./recording";
import { isSampled, samplePings } from "./sampling";
import type { Ping } from "./sampling";
import type { Sampling } from "./samplings";
import type { FoundTraversal, ScoreInput, ScreenRow } from "./score";

const EARLIER = { share: 0.2, intervalS: 5 };

export interface CoreRun {
  input: ScoreInput;
  network: Network;
  traversals: Traversals;
  /** Vehicle names by the core's dense number. */
  vehicles: string[];
}

/** Samples a recording, runs the core on the pings and puts its rows and traversals beside truth and oracle. */
export function runOnRecording(recording: Recording, sampling: Sampling): CoreRun {
  const prior = sampling.legsKnown ? runOnRecording(recording, { ...sampling, ...EARLIER, legsKnown: false }).network : undefined;
  const pings = pingsOf(recording, sampling);
  const { columns, vehicles } = toColumns(pings);
  const { truth, oracle } = recording;
  const { network, traversals, openTracks } = processCity(columns, truth.junctions, createH3Index(), { driveSide: truth.driveSide }, prior);
  const isIn = (vehicleId: string) => isSampled(truth.scenario, vehicleId, sampling.share);
  return {
    network,
    traversals,
    vehicles,
    input: {
      truth,
      oracle: oracle[sampling.share * 100],
      passages: recording.passages.filter((passage) => isIn(passage.vehicleId)),
      pingTimes: timesByVehicle(pings),
      intervalS: sampling.intervalS,
      rows: toRows(network, traversals, openTracks),
      traversals: toFound(network, traversals, vehicles),
    },
  };
}

export function pingsOf(recording: Recording, sampling: Sampling): Ping[] {
  const { truth } = recording;
  const plane = createPlane(truth.origin.lat, truth.origin.lon);
  return recording.courses
    .filter((course) => isSampled(truth.scenario, course.id, sampling.share))
    .flatMap((course) => samplePings(course, truth.scenario, sampling.intervalS, sampling.noise, truth.startMs, plane));
}

export function toColumns(pings: Ping[]): { columns: PingColumns; vehicles: string[] } {
  const numbers = new Map<string, number>();
  for (const ping of pings) if (!numbers.has(ping.vehicleId)) numbers.set(ping.vehicleId, numbers.size);
  const columns = {
    length: pings.length,
    vehicle: Uint32Array.from(pings, (ping) => numbers.get(ping.vehicleId) ?? 0),
    tMs: Float64Array.from(pings, (ping) => ping.tMs),
    lat: Float64Array.from(pings, (ping) => Number(ping.lat.toFixed(6))),
    lon: Float64Array.from(pings, (ping) => Number(ping.lon.toFixed(6))),
    speedMs: Float32Array.from(pings, (ping) => (ping.speedKmh ?? Number.NaN) / 3.6),
    headingDeg: Float32Array.from(pings, (ping) => ping.headingDeg ?? Number.NaN),
  };
  return { columns, vehicles: [...numbers.keys()] };
}

function timesByVehicle(pings: Ping[]): Map<string, number[]> {
  const times = new Map<string, number[]>();
  for (const ping of pings) {
    const own = times.get(ping.vehicleId);
    if (own) own.push(ping.tMs);
    else times.set(ping.vehicleId, [ping.tMs]);
  }
  return times;
}

function toRows(network: Network, traversals: Traversals, openTracks: OpenTracks): ScreenRow[] {
  return screenRows(network, traversals, legQuarters(network, traversals, openTracks)).map((row) => ({
    ...row,
    junctionId: network.junctions[row.junction].id,
    intervalStart: row.startMs === null ? "all" : new Date(row.startMs).toISOString().replace(".000Z", "Z"),
  }));
}

function toFound(network: Network, traversals: Traversals, vehicles: string[]): FoundTraversal[] {
  return Array.from({ length: traversals.length }, (_, i) => {
    const movement = network.movements[traversals.movement[i]];
    const leg = network.legs[movement.leg];
    return {
      vehicleId: vehicles[traversals.vehicle[i]],
      junctionId: network.junctions[leg.junction].id,
      approachBearingDeg: leg.bearingDeg,
      turn: movement.turn,
      stopLineMs: traversals.stopLineMs[i],
    };
  });
}
