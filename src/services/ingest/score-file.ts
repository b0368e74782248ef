import { penetrationOf } from "@/core/queues/penetration";
import { perMetreOf } from "@/core/queues/unseen-tail";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import { offsetTable, type OffsetSpan } from "@/domain/local-time";
import type { FileMatched } from "./match-file";
import type { PieceStore } from "./pieces/piece-store";
import { encodeRecord } from "./pieces/records";
import type { Run, Tell } from "./pieces/run";
import { queueQuarters, type CityQueues } from "./steps/queue-quarters";
import { tallyLegs, type DaySlice, type LegsTallied, type Scene } from "./steps/tally-legs";

/** Traversals against their references, without those that other uploads brought; what their queues show is still to come. */
export interface FileTallied {
  /** Object that holds the scene. */
  scene: string;
  localTime: OffsetSpan[];
  groups: LegsTallied[];
  matched: number;
  traversals: number;
  /** Number of traversals by local day. */
  days: Map<number, number>;
  /** Share of traffic seen; NaN where it cannot be said. */
  penetration: number;
}

/** Tallies the legs, group by group. `name` names the scene's object. */
export async function tallyFile(run: Run, scene: Scene, matched: FileMatched, uploadId: string, timeZone: string, name: string, tell: Tell): Promise<FileTallied> {
  const localTime = offsetTable(timeZone, matched.firstMs, matched.lastMs);
  await run.store.put(name, [encodeRecord(scene)]);
  const groups = await run.perform(tallyLegs, matched.groups.map((group) => ({ ...group, scene: name, uploadId, localTime })), tell);
  const days = new Map<number, number>();
  for (const group of groups) for (const { day, traversals } of group.days) days.set(day, (days.get(day) ?? 0) + traversals);
  const legs = scene.network.legs.length;
  return {
    scene: name,
    localTime,
    groups,
    matched: groups.reduce((sum, group) => sum + group.matched, 0),
    traversals: groups.reduce((sum, group) => sum + group.traversals, 0),
    days,
    penetration: penetrationOf({ ahead: byLeg(groups, legs, (g) => g.places.ahead), places: byLeg(groups, legs, (g) => g.places.places) }),
  };
}

function byLeg(groups: readonly LegsTallied[], legs: number, of: (group: LegsTallied) => Float64Array): Float64Array {
  const all = new Float64Array(legs);
  for (const group of groups) all.set(of(group), group.legs.from);
  return all;
}

/** The rows of all groups as the database takes them. */
export async function* rowsOf(store: PieceStore, { groups }: FileTallied): AsyncGenerator<Uint8Array> {
  for (const { rows } of groups) yield* store.stream(rows);
}

/** Queues of every quarter; with the tallies they make the slices of all local days. */
export async function scoreQueues(run: Run, { network }: Scene, tallied: FileTallied, tell: Tell): Promise<DaySlice[]> {
  const legs = network.legs.length;
  const city: CityQueues = {
    perMetre: perMetreOf({ ahead: byLeg(tallied.groups, legs, (g) => g.columns.ahead), reachM: byLeg(tallied.groups, legs, (g) => g.columns.reachM) }),
    seenQuarters: new Set(tallied.groups.flatMap((group) => [...group.seenQuarters])),
  };
  const name = `${tallied.scene}.city`;
  await run.store.put(name, [encodeRecord(city)]);
  const inputs = tallied.groups.map(({ queues }) => ({ scene: tallied.scene, city: name, queues, localTime: tallied.localTime }));
  return (await run.perform(queueQuarters, inputs, tell)).flat();
}

/** One slice for each local day, in order of day. */
export async function* slicesOf(store: PieceStore, { groups }: FileTallied, quarters: readonly DaySlice[]): AsyncGenerator<ScreenDay> {
  const byDay = new Map<number, DaySlice[]>();
  for (const slice of [...groups.flatMap((group) => group.slices), ...quarters]) byDay.set(slice.day, [...(byDay.get(slice.day) ?? []), slice]);
  for (const [, slices] of [...byDay].sort(([a], [b]) => a - b)) {
    const parts: ScreenDay[] = [];
    for (const slice of slices) parts.push(decodeScreenDay(await store.read(slice.name, slice)));
    yield mergeScreenDays(parts);
  }
}
