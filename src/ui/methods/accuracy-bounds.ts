/**
 * What the simulations with known truth stayed within, over all reference networks; a test holds them to the recorded
 * table. `ownS` is the part that is not explained by which vehicles happened to be sampled.
 */
export const ACCURACY_BOUNDS = [
  { sampling: "20 %, 5 s", share: "20 %", every: "5 s", delayS: 6, ownS: 1, stopShare: 0.1, reachM: 20 },
  { sampling: "10 %, 15 s", share: "10 %", every: "15 s", delayS: 10, ownS: 1, stopShare: 0.13, reachM: 25 },
  { sampling: "5 %, 30 s", share: "5 %", every: "30 s", delayS: 14, ownS: 2, stopShare: null, reachM: null },
] as const;
