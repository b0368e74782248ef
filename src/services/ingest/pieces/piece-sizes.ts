import type { Context } from "@/services/context";

/** Rows of pings in a piece of work where the context says nothing else: with it a worker stays well below a gigabyte. */
const USUAL_PIECE_ROWS = 500_000;

/** A row of pings as text, and about as many bytes as its share of the traversals. */
const BYTES_PER_ROW = 64;
const LEAST_RANGE_BYTES = 4 * 2 ** 20;
/** Pieces of a phase: fewer, and some workers would wait for the others at its end. */
const PIECES_WANTED = 8;

export interface PieceSizes {
  /** Files from this size on are shared with other workers. */
  sharedBytes: number;
  rangeBytes(fileBytes: number): number;
  /** Pings that one object and one matching may hold. */
  pings: number;
  /** Traversals of a run of legs that are tallied together, as bytes. */
  legBytes: number;
  /** Pieces that a phase of shared work is cut into at least, where there is enough of it. */
  least: number;
}

export function pieceSizes(ctx: Context): PieceSizes {
  const rows = ctx.pieceRows ?? USUAL_PIECE_ROWS;
  const bytes = rows * BYTES_PER_ROW;
  return {
    sharedBytes: bytes,
    rangeBytes: (fileBytes) => Math.min(bytes, Math.max(LEAST_RANGE_BYTES, fileBytes / PIECES_WANTED)),
    pings: rows,
    legBytes: bytes,
    least: PIECES_WANTED,
  };
}
