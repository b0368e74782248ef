import { sql } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { encodeScreenDay } from "@/core/scores/screen-day-codec";
import { seededRandom, type Random } from "@/core/stats/random";
import type { Exit, Leg, LegQuarters, Movement, Network, Traversals, Turn } from "@/core/types";
import { bulkTransaction } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { screenDays, uploads } from "@/db/schema";
import { raiseDataVersion } from "@/services/catalogue/catalogue";
import { storeNetwork, type NetworkKeys } from "@/services/ingest/network-rows";
import { copyTraversals, encodeTraversals, makePartitions } from "@/services/ingest/store-traversals";
import { emptyTraversals } from "@/services/ingest/join-traversals";

/** A Monday. */
export const FIRST_DAY = 20_514;
const DAY_MS = 86_400_000;
const OPEN_FROM_H = 6;
const OPEN_HOURS = 16;
const QUARTER_MS = 900_000;
const LEG_M = 350;
const TRACK_POINTS = 20;
/** Strips are drawn of the first legs only; vehicles of the others have a track from end to end and no more, lest a large city takes long to make. */
const TRACKED_LEGS = 1200;
/** Days that are stored side by side: one is worked out while the database takes in another. */
const SIDE_BY_SIDE = 3;
const UTC = [{ fromMs: 0, offsetMin: 0 }];
const TURN_OF: Record<number, Turn> = { 0: "through", 1: "right", 2: "uturn", 3: "left" };

export interface ScreenSize {
  junctions: number;
  days: number;
  traversals: number;
}

/** Fills an empty database with junctions of four legs and days of traversals, as many uploads of the product would have. */
export async function fillScreenCity(db: Db, { junctions, days, traversals }: ScreenSize): Promise<void> {
  const network = networkOf(junctions);
  const junctionKeys = await storeJunctions(db, network);
  const keys = await storeNetwork(db, network, junctionKeys);
  const perDay = Math.ceil(traversals / days);
  const left = Array.from({ length: days }, (_, k) => FIRST_DAY + k);
  const storeNext = async (): Promise<void> => {
    for (let day = left.shift(); day !== undefined; day = left.shift()) await storeDay(db, network, keys, day, perDay);
  };
  await Promise.all(Array.from({ length: SIDE_BY_SIDE }, storeNext));
  await raiseDataVersion(db);
  await db.execute(sql`analyze`);
}

async function storeDay(db: Db, network: Network, keys: NetworkKeys, day: number, count: number): Promise<void> {
  const random = seededRandom(day);
  const traversals = traversalsOf(network, day, count, random);
  const vehicleHash = BigInt64Array.from({ length: count }, (_, v) => BigInt(day) * 1_000_003n + BigInt(v));
  const vehicle = Uint32Array.from(vehicleHash, (hash) => Number(BigInt.asUintN(32, hash)));
  const [slice] = buildScreenDays(traversals, quartersOf(network, day, random), { movement: keys.movements, leg: keys.legs, vehicle }, UTC);
  await makePartitions(db, [day]);
  await bulkTransaction(db, async (tx, client) => {
    const name = `day-${day}.csv`;
    const [{ id: uploadId }] = await tx
      .insert(uploads)
      .values({ kind: "pings", fileName: name, storageKey: `uploads/${name}`, bytes: 1, sha256: name, state: "done", createdAt: new Date(day * DAY_MS) })
      .returning({ id: uploads.id });
    const localDay = new Int32Array(count).fill(day);
    await copyTraversals(client, encodeTraversals({ uploadId, network, keys, traversals, localDay, vehicleHash }));
    await tx.insert(screenDays).values({ uploadId, day, methodVersion: METHOD_VERSION, medianIntervalS: 5, traversals: count, payload: encodeScreenDay(slice) });
  });
}

async function storeJunctions(db: Db, network: Network): Promise<number[]> {
  const rows = network.junctions.map(({ id, lat, lon }) => ({ id, lat, lon }));
  await db.execute(sql`
    insert into junctions (code, name, lat, lon, h3)
    select id, 'Junction ' || id, lat, lon, '' from json_to_recordset(${JSON.stringify(rows)}::json) as given(id text, lat float8, lon float8)`);
  const { rows: stored } = await db.execute<{ id: number; code: string }>(sql`select id, code from junctions`);
  const byCode = new Map(stored.map((row) => [row.code, row.id]));
  return rows.map((row) => byCode.get(row.id) as number);
}

function networkOf(junctions: number): Network {
  const points = Array.from({ length: junctions }, (_, j) => ({ id: `J${j}`, lat: 45.6 + Math.floor(j / 40) * 0.004, lon: -38.3 + (j % 40) * 0.006 }));
  const legs: Leg[] = [];
  const exits: Exit[] = [];
  const movements: Movement[] = [];
  for (let j = 0; j < junctions; j++) {
    for (let k = 0; k < 4; k++) {
      legs.push(legOf(j, k));
      exits.push({ id: `J${j}-out${k}`, junction: j, bearingDeg: k * 90, line: lineAlong(k, 1), lengthM: LEG_M, support: 100 });
    }
    for (let k = 0; k < 4; k++) for (const turn of [0, 1, 3]) movements.push(movementOf(j * 4 + k, j * 4 + ((k + turn) % 4), legs, exits, turn));
  }
  return { junctions: points, legs, exits, movements, driveSide: "right" };
}

function lineAlong(heading: number, sign: number): Float64Array {
  const angle = (heading * Math.PI) / 2;
  return Float64Array.of(0, 0, sign * LEG_M * Math.sin(angle), sign * LEG_M * Math.cos(angle));
}

function legOf(junction: number, k: number): Leg {
  return {
    id: `J${junction}-in${k}`,
    junction,
    name: `Leg ${k}`,
    bearingDeg: k * 90,
    line: lineAlong(k, -1),
    lengthM: LEG_M,
    upstreamExit: -1,
    storageM: 150,
    freeSpeedMs: 13,
    speedLimitMs: NaN,
    origin: "derived",
    stopLineOrigin: "derived",
    locked: false,
    support: 100,
    doubts: [],
  };
}

function movementOf(leg: number, exit: number, legs: Leg[], exits: Exit[], turn: number): Movement {
  const id = `${legs[leg].id}>${exits[exit].id}`;
  const turnDeg = turn === 3 ? -90 : turn * 90;
  return { id, leg, exit, turnDeg, turn: TURN_OF[turn], referenceS: 25, referenceSource: "unstopped", referenceN: 50, cordonUpM: 250, cordonDownM: 60 };
}

function traversalsOf(network: Network, day: number, count: number, random: Random): Traversals {
  const all = emptyTraversals(count, count * TRACK_POINTS);
  const dayMs = day * DAY_MS + OPEN_FROM_H * 3_600_000;
  const startMs = Float64Array.from({ length: count }, () => dayMs + random() * (OPEN_HOURS - 0.2) * 3_600_000).sort();
  for (let i = 0; i < count; i++) {
    const movement = Math.floor(random() * network.movements.length);
    // Junctions differ, and so do vehicles: from next to nothing to a few minutes.
    const worstS = 20 + (network.legs[network.movements[movement].leg].junction % 17) * 9;
    const waitS = worstS * random() * random();
    const isStopped = waitS > 10;
    all.movement[i] = movement;
    all.vehicle[i] = i;
    all.enterMs[i] = startMs[i];
    all.stopLineMs[i] = startMs[i] + (20 + waitS) * 1000;
    all.exitMs[i] = all.stopLineMs[i] + 6000;
    all.delayS[i] = waitS;
    all.stops[i] = isStopped ? 1 : 0;
    all.stoppedS[i] = isStopped ? waitS - 8 : 0;
    all.farthestStopM[i] = isStopped ? random() * 160 : NaN;
    drawTrack(all, i, waitS, network.movements[movement].leg < TRACKED_LEGS ? TRACK_POINTS : 2);
  }
  return all;
}

/** Along the leg with the wait three quarters of the way. */
function drawTrack(all: Traversals, i: number, waitS: number, points: number): void {
  const from = all.trackOffset[i];
  for (let p = 0; p < points; p++) {
    const share = p / (points - 1);
    all.trackS[from + p] = LEG_M - share * (LEG_M + 15);
    all.trackT[from + p] = share * 28 - 8 + (share > 0.75 ? waitS : 0);
  }
  all.trackOffset[i + 1] = from + points;
}

/** Every leg in every quarter of the open hours. */
function quartersOf(network: Network, day: number, random: Random): LegQuarters {
  const each = OPEN_HOURS * 4;
  const length = network.legs.length * each;
  const reachM = Float32Array.from({ length }, () => random() * 170);
  return {
    length,
    leg: Uint32Array.from({ length }, (_, i) => Math.floor(i / each)),
    startMs: Float64Array.from({ length }, (_, i) => day * DAY_MS + OPEN_FROM_H * 3_600_000 + (i % each) * QUARTER_MS),
    reachM,
    reachEstimateM: reachM.map((metres) => metres * 1.1),
    spilledS: reachM.map((metres) => Math.max(0, metres - 135) * 10),
    observedS: new Float32Array(length).fill(700),
  };
}
