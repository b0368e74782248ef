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
];
