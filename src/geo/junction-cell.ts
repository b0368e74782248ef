import { latLngToCell } from "h3-js";

/** H3 cell of resolution 11 that a junction lies in. */
export function junctionCell(lat: number, lon: number): string {
  return latLngToCell(lat, lon, 11);
}
