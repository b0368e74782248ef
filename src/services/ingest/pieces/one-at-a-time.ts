let last: Promise<unknown> = Promise.resolve();

/**
 * Runs heavy work of this process one after the other, whichever jobs ask for it: two pieces side by side would need
 * twice the memory and be no sooner done on one thread. Never call it from within such work.
 */
export function oneAtATime<T>(work: () => Promise<T>): Promise<T> {
  const turn = last.then(work, work);
  last = turn.catch(() => undefined);
  return turn;
}
