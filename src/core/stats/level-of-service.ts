export const LOS_LETTERS = ["A", "B", "C", "D", "E", "F"] as const;
export type LosLetter = (typeof LOS_LETTERS)[number];

/** Letters and inclusive upper bounds of control delay, seconds a vehicle. */
export type LosTable = readonly { letter: LosLetter; upToS: number }[];

/** Motorised vehicles at signals: Highway Capacity Manual, 7th edition, Exhibit 19-8. Never for junctions without signals. */
export const SIGNALISED_LOS: LosTable = [
  { letter: "A", upToS: 10 },
  { letter: "B", upToS: 20 },
  { letter: "C", upToS: 35 },
  { letter: "D", upToS: 55 },
  { letter: "E", upToS: 80 },
  { letter: "F", upToS: Infinity },
];

/**
 * Letter by delay; null for NaN. `overCapacity` (volume above capacity) makes it F and is for lane groups only:
 * pings cannot see it, approaches and junctions go by delay alone.
 */
export function levelOfService(delayS: number, overCapacity = false, table = SIGNALISED_LOS): LosLetter | null {
  if (Number.isNaN(delayS)) return null;
  if (overCapacity) return "F";
  for (const { letter, upToS } of table) if (delayS <= upToS) return letter;
  return null;
}
