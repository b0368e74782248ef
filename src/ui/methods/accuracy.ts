import measured from "./accuracy.json";

/** One simulated network under one sampling, as `npm run validate -- --write` left it. */
export interface MeasuredAccuracy {
  network: string;
  /** Never looked at while the method was tuned. */
  isKeptAside: boolean;
  sampling: string;
  /** Mean absolute error of a movement's mean delay, weighted by vehicles. */
  delayErrorS: number;
  /** The same from the noise-free course of the same vehicles. */
  sampleErrorS: number;
  biasS: number;
  turnsRight: number;
  legsFound: number;
  legsTrue: number;
  reachErrorM: number;
  sampleReachErrorM: number;
  /** Share of the 95 % intervals of mean delay that hold the truth. */
  intervalsHold: number | null;
}

export const MEASURED_ACCURACY = measured as MeasuredAccuracy[];

/** From the densest sample to the thinnest. */
export const MAIN_SAMPLINGS = ["20 %, 5 s", "10 %, 15 s", "5 %, 30 s"] as const;
