/** Lanes waiting for their moment: a calendar of short slots, each a linked list; a lane waits at most once. */
export interface Calendar {
  schedule(lane: number, timeS: number): void;
  /** Takes one lane out of a slot; -1 when the slot is empty. */
  take(slot: number): number;
  isWaiting(lane: number): boolean;
}

export function createCalendar(lanes: number, slots: number, slotS: number): Calendar {
  const head = new Int32Array(slots + 1).fill(-1);
  const next = new Int32Array(lanes);
  const waiting = new Uint8Array(lanes);
  let current = 0;
  return {
    schedule(lane, timeS) {
      if (waiting[lane] === 1) return;
      let slot = Math.floor(timeS / slotS);
      if (slot < current) slot = current;
      if (slot >= slots) slot = slots;
      waiting[lane] = 1;
      next[lane] = head[slot];
      head[slot] = lane;
    },
    take(slot) {
      current = slot;
      const lane = head[slot];
      if (lane < 0) return -1;
      head[slot] = next[lane];
      waiting[lane] = 0;
      return lane;
    },
    isWaiting: (lane) => waiting[lane] === 1,
  };
}
