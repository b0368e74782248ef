import type { PieceStore } from "./piece-store";
import { decodeRecord } from "./records";

const MOST = 4;
const known = new Map<string, Promise<unknown>>();

/** What `make` made of an object, kept for the next pieces that this process does: the last few of them. */
export function remembered<T, R>(store: PieceStore, name: string, purpose: string, make: (value: R) => T): Promise<T> {
  const key = `${store.id}/${name}/${purpose}`;
  const found = known.get(key);
  if (found) return found as Promise<T>;
  const made = store.read(name).then((bytes) => make(decodeRecord<R>(bytes)));
  known.set(key, made);
  made.catch(() => known.delete(key));
  for (const old of known.keys()) {
    if (known.size <= MOST) break;
    known.delete(old);
  }
  return made;
}

/** Lets go of everything that belongs to a store. */
export function forget(store: PieceStore): void {
  for (const key of known.keys()) if (key.startsWith(`${store.id}/`)) known.delete(key);
}
