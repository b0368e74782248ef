import type { RankedJunction } from "@/domain/screen";
import { DELAY_SCALE, delayColor } from "@/ui/scales";
import { boundsOf, needleEnd } from "./needles";
import { worldAt, type WorldPoint } from "./world";

export type MarkedJunction = Pick<RankedJunction, "junctionId" | "lat" | "lon" | "needles" | "rank">;

/** What the map draws of all junctions, as the graphics card takes it; places are counted from `origin`, so that single precision is enough. */
export interface Marks {
  origin: WorldPoint;
  junctionIds: Int32Array;
  /** x and y of each junction. */
  dots: Float32Array;
  /** 1 for each ranked junction. */
  ranked: Uint8Array;
  /** `NEEDLE_WORDS` for each leg, in the order of drawing: x, y, east, south, width in pixels, colour as RGBA bytes. */
  needles: Float32Array;
  /** The place in `junctionIds` of each needle's junction. */
  needleOwner: Uint32Array;
}

export const NEEDLE_WORDS = 6;
export const SHOWN = 1;
export const STRONG = 2;
export const RANKED = 4;
/** Of the needles of a selected junction. */
export const STRONG_PX = 5.5;
const NO_DELAY_PX = 2;

/** Where and how every junction and leg is drawn. Cost: the legs, sorted. */
export function marksOf(junctions: readonly MarkedJunction[]): Marks {
  const [west, south] = boundsOf(junctions) ?? [0, 0];
  const origin = worldAt(south, west);
  const dots = new Float32Array(junctions.length * 2);
  const drawn: { owner: number; delayS: number | null; end: WorldPoint }[] = [];
  junctions.forEach((junction, owner) => {
    dots.set(fromOrigin(origin, worldAt(junction.lat, junction.lon)), owner * 2);
    for (const needle of junction.needles) {
      const [lon, lat] = needleEnd(junction, needle);
      drawn.push({ owner, delayS: needle.delayS, end: worldAt(lat, lon) });
    }
  });
  // The worst lie uppermost.
  drawn.sort((a, b) => (a.delayS ?? -1) - (b.delayS ?? -1));
  const needles = new Float32Array(drawn.length * NEEDLE_WORDS);
  const colors = new Uint8Array(needles.buffer);
  drawn.forEach(({ owner, delayS, end }, at) => {
    const word = at * NEEDLE_WORDS;
    const [x, y] = [dots[owner * 2], dots[owner * 2 + 1]];
    const [endX, endY] = fromOrigin(origin, end);
    needles.set([x, y, endX - x, endY - y, needleWidthPx(delayS)], word);
    colors.set(rgbaOf(delayColor(delayS)), (word + 5) * 4);
  });
  return {
    origin,
    junctionIds: Int32Array.from(junctions, ({ junctionId }) => junctionId),
    dots,
    ranked: Uint8Array.from(junctions, ({ rank }) => (rank === null ? 0 : 1)),
    needles,
    needleOwner: Uint32Array.from(drawn, ({ owner }) => owner),
  };
}

/** `SHOWN`, `STRONG` and `RANKED` of each dot, and of each needle that of its junction. */
export interface Flags {
  dots: Uint8Array;
  needles: Uint8Array;
}

export function flagsOf({ junctionIds, ranked, needleOwner }: Marks, shownIds: ReadonlySet<number>, selected: number | null): Flags {
  const dots = Uint8Array.from(junctionIds, (id, at) => (shownIds.has(id) ? SHOWN : 0) | (id === selected ? STRONG : 0) | (ranked[at] ? RANKED : 0));
  return { dots, needles: Uint8Array.from(needleOwner, (owner) => dots[owner]) };
}

/** The junction nearest to a place, `reach` away at most, those with the flag `SHOWN` before the others; all in the world's measure. */
export function nearestMark({ origin, dots, junctionIds }: Marks, flags: Uint8Array, at: WorldPoint, reach: number): number | null {
  const [x, y] = fromOrigin(origin, at);
  let nearest: number | null = null;
  let least = Infinity;
  for (let i = 0; i < junctionIds.length; i++) {
    const distance = Math.hypot(dots[2 * i] - x, dots[2 * i + 1] - y);
    const rated = distance + (flags[i] & SHOWN ? 0 : reach);
    if (distance <= reach && rated < least) [nearest, least] = [junctionIds[i], rated];
  }
  return nearest;
}

/** The short way round, where the city lies near the 180th meridian. */
export function fromOrigin(origin: WorldPoint, at: WorldPoint): [number, number] {
  const x = at.x - origin.x;
  return [x - Math.round(x), at.y - origin.y];
}

/** Dark needles are broader as well: far out they are what the eye has to find. */
function needleWidthPx(delayS: number | null): number {
  const step = DELAY_SCALE.findLastIndex(({ from }) => (delayS ?? 0) >= from);
  return step <= 0 ? NO_DELAY_PX : 2.6 + (step - 1) * 0.55;
}

function rgbaOf(color: string): number[] {
  return [...[1, 3, 5].map((at) => parseInt(color.slice(at, at + 2), 16)), 255];
}
