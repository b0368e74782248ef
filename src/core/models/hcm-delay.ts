/** Delay of a lane group by the Highway Capacity Manual, 7th edition, Chapter 19. Seconds a vehicle; T in hours; flows in veh/h. */

/** Progression factor PF, Eq. 19-20 and 19-21; P is the proportion arriving on green. Exactly 1 at P = g/C. */
export function progressionFactor(greenRatio: number, x: number, arrivingOnGreen: number): number {
  const full = Math.min(1, x);
  const y = full * greenRatio;
  const platoon = ((1 - arrivingOnGreen) / (1 - greenRatio)) * ((1 - y) / (1 - full * arrivingOnGreen));
  return platoon * (1 + (y * (1 - arrivingOnGreen / greenRatio)) / (1 - greenRatio));
}

/** Uniform delay d1, Eq. 19-19; zero when the light is always green. */
export function uniformDelayS(cycleS: number, greenS: number, x: number, pf = 1): number {
  const ratio = greenS / cycleS;
  if (ratio >= 1) return 0;
  return (pf * 0.5 * cycleS * (1 - ratio) ** 2) / (1 - Math.min(1, x) * ratio);
}

/** Incremental delay d2, Eq. 19-26. */
export function incrementalDelayS(x: number, capacityVph: number, options: { hours?: number; k?: number; filtering?: number } = {}): number {
  const { hours = 0.25, k = 0.5, filtering = 1 } = options;
  return 900 * hours * (x - 1 + Math.sqrt((x - 1) ** 2 + (8 * k * filtering * x) / (capacityVph * hours)));
}

/** Upstream filtering factor I, Eq. 19-6; `xUpstream` at most 1. */
export function upstreamFiltering(xUpstream: number): number {
  return Math.max(0.09, 1 - 0.91 * Math.min(1, xUpstream) ** 2.68);
}

/** Least k of an actuated phase by its passage time, Eq. 19-23. */
export function actuatedKMin(passageS: number): number {
  return Math.max(0.04, -0.375 + 0.354 * passageS - 0.091 * passageS ** 2 + 0.00889 * passageS ** 3);
}

/** k of an actuated phase, Eq. 19-22, between its least value and 0.5. */
export function actuatedK(volumeToCapacity: number, passageS: number): number {
  const least = actuatedKMin(passageS);
  return Math.min(0.5, Math.max(least, (1 - 2 * least) * (volumeToCapacity - 0.5) + least));
}

/** Initial-queue delay d3, Eq. 19-44 to 19-49; `queue` vehicles wait at the start. */
export function initialQueueDelayS(queue: number, volumeVph: number, capacityVph: number, hours = 0.25): number {
  const over = volumeVph >= capacityVph;
  const endWithout = over ? hours * (volumeVph - capacityVph) : 0;
  const clearH = over ? hours : Math.min(queue / (capacityVph - volumeVph), hours);
  const end = queue + clearH * (volumeVph - capacityVph);
  const area =
    (clearH * (queue + end - endWithout)) / 2 + (end ** 2 - endWithout ** 2) / (2 * capacityVph) - queue ** 2 / (2 * capacityVph);
  return (3600 / (volumeVph * hours)) * area;
}
