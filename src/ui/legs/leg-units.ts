import { lengthFromMetres, speedFromMs, type Units } from "@/ui/format";

const KMH_PER_MPH = 1.609344;
const METRES_PER_FOOT = 0.3048;

/** A length as a person typed it in the city's unit. */
export function metresFromLength(value: number, units: Units): number {
  return units === "us" ? value * METRES_PER_FOOT : value;
}

export function kmhFromSpeed(value: number, units: Units): number {
  return units === "us" ? value * KMH_PER_MPH : value;
}

/** Text of a field: whole units, empty where nothing is known. */
export function lengthText(valueM: number | null, units: Units): string {
  return valueM === null ? "" : String(Math.round(lengthFromMetres(valueM, units)));
}

export function speedText(valueMs: number | null, units: Units): string {
  return valueMs === null ? "" : String(Math.round(speedFromMs(valueMs, units)));
}

/** A number as people write it, with point or comma; NaN where it is none, null where the field is empty. */
export function typedNumber(text: string): number | null {
  const plain = text.trim().replace(",", ".").replace("−", "-");
  if (plain === "") return null;
  return /^[+-]?(\d+\.?\d*|\.\d+)$/.test(plain) ? Number(plain) : NaN;
}
