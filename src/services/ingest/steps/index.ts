import type { PieceKind } from "../pieces/piece-kind";
import { matchVehicles } from "./match-vehicles";
import { queueQuarters } from "./queue-quarters";
import { readRows } from "./read-rows";
import { tallyLegs } from "./tally-legs";

/** Every kind of work that is cut into pieces. */
export const PIECE_KINDS = [readRows, matchVehicles, tallyLegs, queueQuarters] as unknown as readonly PieceKind<unknown, unknown>[];
