import type { PieceKind } from "../pieces/piece-kind";
import { cutTime } from "./cut-time";
import { matchVehicles } from "./match-vehicles";
import { queueQuarters } from "./queue-quarters";
import { readRows } from "./read-rows";
import { tallyLegs } from "./tally-legs";

/** Every kind of work that is cut into pieces. */
export const PIECE_KINDS = [readRows, cutTime, matchVehicles, tallyLegs, queueQuarters] as unknown as readonly PieceKind<unknown, unknown>[];
