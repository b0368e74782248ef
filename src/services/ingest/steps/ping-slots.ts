import type { PingColumns } from "@/core/types";
import { emptyColumns } from "@/formats/pings/ping-columns";
import type { PieceStore } from "../pieces/piece-store";

/** Vehicles are dealt out to so many slots by the first bits of their keyed hash: whole vehicles, whoever read them. */
export const SLOTS = 1024;
/** Of the upper half of a hash. */
const SLOT_SHIFT = 22;

/** An object of pings in the order of their vehicles' hashes, a section for each slot. */
export interface SlottedPings {
  name: string;
  /** Bytes at which each slot begins and the last one ends. */
  offsets: Float64Array;
  /** Pings by slot. */
  pings: Uint32Array;
  /** Of its first and last ping in time. */
  firstMs: number;
  lastMs: number;
}

/** Vehicles and pings of a slot, then hashes, then pings by vehicle, then rows of four float64 (the last: two float32). */
const HEAD_BYTES = 8;
const ROW_BYTES = 32;

const padded = (bytes: number): number => (bytes + 7) & ~7;

/** Sorts pings by vehicle and writes them. `hashOf` gives the keyed hash by dense vehicle number. O(pings + vehicles × log). */
export async function writeSlots(store: PieceStore, name: string, pings: PingColumns, hashOf: BigInt64Array): Promise<SlottedPings> {
  const counts = new Uint32Array(hashOf.length);
  for (let i = 0; i < pings.length; i++) counts[pings.vehicle[i]] += 1;
  // Halves of the hashes, the lower one first: whole ones would be objects.
  const halves = new Uint32Array(hashOf.buffer, hashOf.byteOffset, 2 * hashOf.length);
  const seen = counts.map((_, v) => v).filter((v) => counts[v] > 0);
  seen.sort((a, b) => halves[2 * a + 1] - halves[2 * b + 1] || halves[2 * a] - halves[2 * b]);

  const vehiclesIn = new Uint32Array(SLOTS);
  const pingsIn = new Uint32Array(SLOTS);
  const slots = seen.map((v) => halves[2 * v + 1] >>> SLOT_SHIFT);
  seen.forEach((v, k) => {
    vehiclesIn[slots[k]] += 1;
    pingsIn[slots[k]] += counts[v];
  });
  const offsets = new Float64Array(SLOTS + 1);
  for (let s = 0; s < SLOTS; s++) {
    const bytes = vehiclesIn[s] === 0 ? 0 : HEAD_BYTES + 8 * vehiclesIn[s] + padded(4 * vehiclesIn[s]) + ROW_BYTES * pingsIn[s];
    offsets[s + 1] = offsets[s] + bytes;
  }
  const buffer = new ArrayBuffer(offsets[SLOTS]);
  // Index of the first row of each vehicle, in rows of eight bytes from the beginning of the object.
  const nextRow = new Float64Array(hashOf.length);
  for (let k = 0; k < seen.length; ) {
    const slot = slots[k];
    const [vehicles, at] = [vehiclesIn[slot], offsets[slot]];
    new Uint32Array(buffer, at, 2).set([vehicles, pingsIn[slot]]);
    const hashes = new BigInt64Array(buffer, at + HEAD_BYTES, vehicles);
    const perVehicle = new Uint32Array(buffer, at + HEAD_BYTES + 8 * vehicles, vehicles);
    let row = (at + HEAD_BYTES + 8 * vehicles + padded(4 * vehicles)) / 8;
    for (let n = 0; n < vehicles; n++, k++) {
      hashes[n] = hashOf[seen[k]];
      perVehicle[n] = counts[seen[k]];
      nextRow[seen[k]] = row;
      row += (counts[seen[k]] * ROW_BYTES) / 8;
    }
  }
  const wide = new Float64Array(buffer);
  const narrow = new Float32Array(buffer);
  let firstMs = Infinity;
  let lastMs = -Infinity;
  for (let i = 0; i < pings.length; i++) {
    if (pings.tMs[i] < firstMs) firstMs = pings.tMs[i];
    if (pings.tMs[i] > lastMs) lastMs = pings.tMs[i];
    const row = nextRow[pings.vehicle[i]];
    nextRow[pings.vehicle[i]] = row + ROW_BYTES / 8;
    wide[row] = pings.tMs[i];
    wide[row + 1] = pings.lat[i];
    wide[row + 2] = pings.lon[i];
    narrow[2 * row + 6] = pings.speedMs[i];
    narrow[2 * row + 7] = pings.headingDeg[i];
  }
  await store.put(name, [new Uint8Array(buffer)]);
  return { name, offsets, pings: pingsIn, firstMs, lastMs };
}

/** Some slots of an object. */
export interface SlotRange {
  name: string;
  from: number;
  to: number;
  pings: number;
}

export interface VehiclePings {
  pings: PingColumns;
  /** Keyed hash by dense vehicle number; numbers are in the order of the hashes. */
  hashes: BigInt64Array;
}

/** All pings of the vehicles of some slots, from every object that has any, one after the other. O(pings + vehicles × log). */
export async function readSlots(store: PieceStore, ranges: readonly SlotRange[]): Promise<VehiclePings> {
  const total = ranges.reduce((sum, range) => sum + range.pings, 0);
  const pings = emptyColumns(total);
  // Vehicles are numbered as they come up, once for each section, until all hashes are known.
  const lists: BigInt64Array[] = [];
  let numbers = 0;
  for (const { name, from, to } of ranges) {
    for (const section of sectionsIn(aligned(await store.read(name, { from, to })))) {
      copySection(section, numbers, pings);
      // A copy: a view would hold all bytes of the object.
      lists.push(section.hashes.slice());
      numbers += section.hashes.length;
    }
  }
  const hashes = unionOf(lists);
  const dense = new Uint32Array(numbers);
  let number = 0;
  for (const list of lists) {
    let vehicle = 0;
    for (let n = 0; n < list.length; n++) {
      while (hashes[vehicle] !== list[n]) vehicle += 1;
      dense[number++] = vehicle;
    }
  }
  for (let i = 0; i < total; i++) pings.vehicle[i] = dense[pings.vehicle[i]];
  return { pings, hashes };
}

function copySection({ counts, wide, narrow }: Section, firstNumber: number, to: PingColumns): void {
  let at = to.length;
  let row = 0;
  for (let n = 0; n < counts.length; n++) {
    const end = at + counts[n];
    to.vehicle.fill(firstNumber + n, at, end);
    for (; at < end; at++, row += 4) {
      to.tMs[at] = wide[row];
      to.lat[at] = wide[row + 1];
      to.lon[at] = wide[row + 2];
      to.speedMs[at] = narrow[2 * row + 6];
      to.headingDeg[at] = narrow[2 * row + 7];
    }
  }
  to.length = at;
}

interface Section {
  hashes: BigInt64Array;
  counts: Uint32Array;
  wide: Float64Array;
  narrow: Float32Array;
}

function sectionsIn(bytes: Uint8Array): Section[] {
  const sections: Section[] = [];
  const { buffer, byteOffset } = bytes;
  for (let at = byteOffset; at < byteOffset + bytes.length; ) {
    const [vehicles, rows] = new Uint32Array(buffer, at, 2);
    const counts = at + HEAD_BYTES + 8 * vehicles;
    const first = counts + padded(4 * vehicles);
    sections.push({
      hashes: new BigInt64Array(buffer, at + HEAD_BYTES, vehicles),
      counts: new Uint32Array(buffer, counts, vehicles),
      wide: new Float64Array(buffer, first, rows * 4),
      narrow: new Float32Array(buffer, first, rows * 8),
    });
    at = first + rows * ROW_BYTES;
  }
  return sections;
}

/** Every hash once, ascending as unsigned numbers: the order in which each list has its own. */
function unionOf(lists: readonly BigInt64Array[]): BigInt64Array {
  const all = new BigUint64Array(lists.reduce((sum, list) => sum + list.length, 0));
  let at = 0;
  for (const list of lists) {
    all.set(new BigUint64Array(list.buffer, list.byteOffset, list.length), at);
    at += list.length;
  }
  all.sort();
  const unique = all.filter((hash, i) => i === 0 || hash !== all[i - 1]);
  return new BigInt64Array(unique.buffer, unique.byteOffset, unique.length);
}

function aligned(bytes: Uint8Array): Uint8Array {
  return bytes.byteOffset % 8 === 0 ? bytes : new Uint8Array(bytes);
}

/** How many of the vehicles, which are in the order of their hashes, are in the first `slots` slots. */
export function vehiclesBefore(hashes: BigInt64Array, slots: number): number {
  const halves = new Uint32Array(hashes.buffer, hashes.byteOffset, 2 * hashes.length);
  let vehicles = 0;
  while (vehicles < hashes.length && halves[2 * vehicles + 1] >>> SLOT_SHIFT < slots) vehicles += 1;
  return vehicles;
}

/** Cuts the slots into runs of at most about `most` pings, and into no fewer than `least` where there are enough. */
export function cutSlots(objects: readonly SlottedPings[], most: number, least: number): SlotRange[][] {
  const pings = new Float64Array(SLOTS);
  for (const object of objects) object.pings.forEach((n, s) => (pings[s] += n));
  const bound = Math.min(most, pings.reduce((sum, n) => sum + n, 0) / least);
  const cuts: SlotRange[][] = [];
  for (let from = 0; from < SLOTS; ) {
    let to = from;
    let held = 0;
    while (to < SLOTS && (held === 0 || held + pings[to] <= bound)) held += pings[to++];
    if (held > 0) cuts.push(rangesOf(objects, from, to));
    from = to;
  }
  return cuts;
}

/** The first slots that hold at least so many pings, and how many slots those are. */
export function firstSlots(objects: readonly SlottedPings[], wanted: number): { ranges: SlotRange[]; slots: number } {
  let held = 0;
  let to = 0;
  while (to < SLOTS && held < wanted) {
    for (const object of objects) held += object.pings[to];
    to += 1;
  }
  return { ranges: rangesOf(objects, 0, to), slots: to };
}

function rangesOf(objects: readonly SlottedPings[], from: number, to: number): SlotRange[] {
  return objects
    .map(({ name, offsets, pings }) => ({ name, from: offsets[from], to: offsets[to], pings: pings.subarray(from, to).reduce((sum, n) => sum + n, 0) }))
    .filter((range) => range.pings > 0);
}
