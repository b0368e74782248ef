/** One vehicle's way in a drawing of time (seconds, across) and distance to the stop line (metres, up). */
export interface DrawnQueue {
  paths: { tS: number; sM: number }[][];
  /** Where each stopped vehicle comes to a stand. */
  tail: { tS: number; sM: number }[][];
  red: { fromS: number; toS: number }[];
}

const CYCLE_S = 60;
const RED_S = 32;
const HEADWAY_S = 4.2;
const FREE_MS = 13;
const SPACING_M = 7.5;
/** Each vehicle starts this much after the one before it. */
const START_LAG_S = 1.3;

/** Deterministic arrivals at a fixed-time signal: join the queue's end, start in turn, leave at free speed. */
export function drawQueue(cycles: number, lengthM: number): DrawnQueue {
  const paths: DrawnQueue["paths"] = [];
  const tail: DrawnQueue["tail"] = [];
  const red: DrawnQueue["red"] = [];
  let arrivalS = 2;
  for (let cycle = 0; cycle < cycles; cycle++) {
    const redS = cycle * CYCLE_S;
    const greenS = redS + RED_S;
    const stands: { tS: number; sM: number }[] = [];
    for (; arrivalS < redS + CYCLE_S; arrivalS += HEADWAY_S) {
      const sM = stands.length * SPACING_M;
      const stopS = arrivalS - sM / FREE_MS;
      const startS = greenS + stands.length * START_LAG_S;
      const enter = { tS: arrivalS - lengthM / FREE_MS, sM: lengthM };
      if (stopS < startS) {
        stands.push({ tS: stopS, sM });
        paths.push([enter, { tS: stopS, sM }, { tS: startS, sM }, { tS: startS + sM / FREE_MS, sM: 0 }]);
      } else {
        paths.push([enter, { tS: arrivalS, sM: 0 }]);
      }
    }
    tail.push(stands);
    red.push({ fromS: redS, toS: greenS });
  }
  return { paths, tail, red };
}
