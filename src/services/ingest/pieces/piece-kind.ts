import type { Db } from "@/db/client";
import type { Storage } from "@/storage/storage";
import type { PieceStore } from "./piece-store";

/** What a piece of work may touch. */
export interface Bench {
  /** For looking only: a piece that is done twice must come out the same. */
  db: Db;
  storage: Storage;
  store: PieceStore;
  /** Place of the piece in its phase: names the objects that it writes. */
  name: string;
  /** How much of the piece is done. Throws where the worker is told to stop. */
  tell(share: number): Promise<void>;
}

/**
 * A kind of work that is cut into pieces: from an input to an outcome, each any value that `encodeRecord` takes, and to
 * objects in the store. Which process does a piece, and how often, changes nothing.
 */
export interface PieceKind<I, O> {
  name: string;
  work(bench: Bench, input: I): Promise<O>;
}
