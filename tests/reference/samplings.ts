import { OPEN_SKY, STREET_CANYON } from "./sampling";
import type { NoiseOptions } from "./sampling";

/** One way to sample a scenario; `name` is its key in the table of accuracy. */
export interface Sampling {
  name: string;
  share: number;
  intervalS: number;
  noise: NoiseOptions;
  /** Legs come from a 20 %, 5 s file of the same streets, as after earlier uploads. */
  legsKnown: boolean;
}

const BASE = { noise: OPEN_SKY, legsKnown: false };
/** Clocks of receivers and of the supplier's gateway: most pings are a second off. */
const JITTER: NoiseOptions = { ...OPEN_SKY, jitterMs: 1000 };

/** The three samplings that the accuracy to reach is stated for. */
export const MAIN_SAMPLINGS: Sampling[] = [
  { ...BASE, name: "20 %, 5 s", share: 0.2, intervalS: 5 },
  { ...BASE, name: "10 %, 15 s", share: 0.1, intervalS: 15 },
  { ...BASE, name: "5 %, 30 s", share: 0.05, intervalS: 30 },
  { ...BASE, name: "5 %, 30 s, legs known", share: 0.05, intervalS: 30, legsKnown: true },
];

/** Beyond them; the whole traffic only where every vehicle was recorded. */
export const MORE_SAMPLINGS: Sampling[] = [
  { ...BASE, name: "100 %, 5 s", share: 1, intervalS: 5 },
  { ...BASE, name: "20 %, 1 s", share: 0.2, intervalS: 1 },
  { ...BASE, name: "10 %, 10 s", share: 0.1, intervalS: 10 },
  { ...BASE, name: "2 %, 10 s", share: 0.02, intervalS: 10 },
  { ...BASE, name: "20 %, 5 s, street canyon", share: 0.2, intervalS: 5, noise: STREET_CANYON },
  { ...BASE, name: "20 %, 5 s, no speed or heading", share: 0.2, intervalS: 5, noise: { ...OPEN_SKY, withSpeed: false, withHeading: false } },
  { ...BASE, name: "10 %, 15 s, clocks off", share: 0.1, intervalS: 15, noise: JITTER },
];

/** Where every share is combined with every interval. */
export const CROSSED_SCENARIO = "drawn";

/** All pairs of share and interval, those named above left out. */
const CROSSED_SAMPLINGS: Sampling[] = [1, 0.2, 0.1, 0.05, 0.02].flatMap((share) =>
  [1, 5, 10, 15, 30]
    .map((intervalS) => ({ ...BASE, name: `${share * 100} %, ${intervalS} s`, share, intervalS }))
    .filter(({ name }) => [...MAIN_SAMPLINGS, ...MORE_SAMPLINGS].every((sampling) => sampling.name !== name)),
);

/** Samplings of a scenario for the table. */
export function samplingsOf(scenarioId: string, mainOnly: boolean): Sampling[] {
  if (mainOnly) return MAIN_SAMPLINGS;
  return [...MAIN_SAMPLINGS, ...MORE_SAMPLINGS, ...(scenarioId === CROSSED_SCENARIO ? CROSSED_SAMPLINGS : [])];
}
