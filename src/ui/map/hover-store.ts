/** Which junction the pointer is on, in list or map; kept out of React so that hovering draws no list again. */
export interface HoverStore {
  get: () => number | null;
  set: (junctionId: number | null) => void;
  subscribe: (listener: () => void) => () => void;
}

export function createHoverStore(): HoverStore {
  let current: number | null = null;
  const listeners = new Set<() => void>();
  return {
    get: () => current,
    set: (junctionId) => {
      if (junctionId === current) return;
      current = junctionId;
      for (const listener of listeners) listener();
    },
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}
