/** Web Mercator with the whole world from 0 to 1 in both directions, north up at 0: the map library's own measure. */

export interface WorldPoint {
  x: number;
  y: number;
}

const RAD = Math.PI / 180;
/** Pixels of the world at zoom 0, as the map library has it. */
const WORLD_PX = 512;

export function worldAt(lat: number, lon: number): WorldPoint {
  return { x: (lon + 180) / 360, y: (1 - Math.log(Math.tan(Math.PI / 4 + (lat * RAD) / 2)) / Math.PI) / 2 };
}

export function worldPxAt(zoom: number): number {
  return WORLD_PX * 2 ** zoom;
}
