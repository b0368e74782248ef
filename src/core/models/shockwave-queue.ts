/** Triangular fundamental diagram (Lighthill and Whitham 1955, Richards 1956, Newell 1993). Speeds in km/h, wave speed positive upstream. */
export interface Triangle {
  freeSpeedKmh: number;
  waveSpeedKmh: number;
  jamVehKm: number;
}

export interface ShockwaveQueue {
  capacityVph: number;
  criticalVehKm: number;
  /** Speed at which the back of queue runs upstream while the light is red, km/h. */
  growthKmh: number;
  /** Seconds after the start of red at which the queue is longest, and that length. */
  longestAtS: number;
  longestM: number;
  stopped: number;
  /** Seconds after the start of red at which the last queued vehicle passes the line. */
  clearAtS: number;
  /** Vehicle-seconds in one cycle. */
  delayVehS: number;
}

/** Queue behind one red of `redS` under a steady inflow below capacity. */
export function shockwaveQueue(diagram: Triangle, redS: number, inflowVph: number): ShockwaveQueue {
  const { freeSpeedKmh: vf, waveSpeedKmh: w, jamVehKm: kj } = diagram;
  const criticalVehKm = (kj * w) / (w + vf);
  const capacityVph = vf * criticalVehKm;
  if (!(inflowVph < capacityVph)) throw new RangeError(`Inflow must stay below the capacity of ${capacityVph} veh/h, got ${inflowVph}.`);
  const growthKmh = inflowVph / (kj - inflowVph / vf);
  const longestAtS = (w * redS) / (w - growthKmh);
  const longestM = (growthKmh * longestAtS) / 3.6;
  return {
    capacityVph,
    criticalVehKm,
    growthKmh,
    longestAtS,
    longestM,
    stopped: (kj * longestM) / 1000,
    clearAtS: redS / (1 - inflowVph / capacityVph),
    delayVehS: ((inflowVph / 3600) * redS ** 2) / (2 * (1 - inflowVph / capacityVph)),
  };
}
