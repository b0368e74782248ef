import type { QueueOptions } from "./options";

/**
 * Distance from the stop line from which a tail fills a leg, metres; NaN where that cannot be said. In a leg for few
 * vehicles their places are in more doubt than the tenth that may be free.
 */
export function fullFromM(storageM: number, options: QueueOptions): number {
  if (!(storageM >= options.leastStorageM)) return NaN;
  return Math.min(options.spillShare * storageM, storageM - options.doubtM);
}
