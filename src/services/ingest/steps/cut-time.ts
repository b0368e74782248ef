import type { PingColumns } from "@/core/types";
import { emptyColumns } from "@/formats/pings/ping-columns";
import type { PieceKind } from "../pieces/piece-kind";
import { firstSlots, readSlots, writeSlots, type SlottedPings } from "./ping-slots";

/** From a moment on, up to another, both included. */
export interface Span {
  firstMs: number;
  lastMs: number;
}

export interface PingsToCut {
  pings: SlottedPings;
  spans: Span[];
}

/** The pings of each span as an object of their own; null where there are none. */
export const cutTime: PieceKind<PingsToCut, (SlottedPings | null)[]> = {
  name: "cut time",
  async work({ store, name }, { pings: object, spans }) {
    const { pings, hashes } = await readSlots(store, firstSlots([object], Infinity).ranges);
    const parts: (SlottedPings | null)[] = [];
    for (const [i, span] of spans.entries()) {
      const chosen = within(pings, span);
      parts.push(chosen.length === 0 ? null : await writeSlots(store, `${name}.span-${i}`, chosen, hashes));
    }
    return parts;
  },
};

function within(pings: PingColumns, { firstMs, lastMs }: Span): PingColumns {
  const chosen = new Uint32Array(pings.length);
  let length = 0;
  for (let i = 0; i < pings.length; i++) if (pings.tMs[i] >= firstMs && pings.tMs[i] <= lastMs) chosen[length++] = i;
  if (length === pings.length) return pings;
  const some = emptyColumns(length);
  some.length = length;
  for (const name of ["vehicle", "tMs", "lat", "lon", "speedMs", "headingDeg"] as const) {
    const [from, to] = [pings[name], some[name]];
    for (let k = 0; k < length; k++) to[k] = from[chosen[k]];
  }
  return some;
}
