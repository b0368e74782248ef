import { z } from "zod";
import type { Origin, Turn } from "@/core/types";
import type { ExitView } from "./junction";

/** A leg in the list of what an engineer should look at, most doubtful first. */
export interface LegToCheck {
  id: number;
  name: string;
  bearingDeg: number;
  junction: { id: number; code: string; name: string };
  doubts: string[];
  support: number;
  storageM: number | null;
  origin: Origin;
  locked: boolean;
}

/** A leg with all that an engineer may settle about it. */
export interface LegOfCheck {
  id: number;
  name: string;
  bearingDeg: number;
  /** East and north metres from the junction, from the stop line upstream. */
  line: [number, number][];
  lengthM: number;
  storageM: number | null;
  freeSpeedMs: number | null;
  speedLimitMs: number | null;
  lanes: number | null;
  upstream: { junctionId: number; name: string } | null;
  origin: Origin;
  stopLineOrigin: Origin | "default";
  locked: boolean;
  support: number;
  doubts: string[];
}

/** How far the pings around a junction are matched to its changed legs; null: all of them. */
export type Rematch = "waiting" | "running" | "failed" | null;

export interface LegCheckView {
  junction: { id: number; code: string; name: string };
  legs: LegOfCheck[];
  exits: ExitView[];
  movements: { id: number; legId: number; exitId: number; turn: Turn; turnDeg: number }[];
  rematch: Rematch;
}

/** Pings near a junction as they were seen: a sample that shows where vehicles drive, without saying which vehicle. */
export interface PingCloud {
  /** East and north metres from the junction. */
  eastM: number[];
  northM: number[];
  headingDeg: (number | null)[];
  speedMs: (number | null)[];
}

const LegId = z.coerce.number().int().positive();
const Point = z.tuple([z.number().min(-2000).max(2000), z.number().min(-2000).max(2000)]);
/** East and north metres from the junction, from the stop line upstream. */
const Line = z.array(Point).min(2, "A leg line needs at least two points.").max(200);
const Name = z.string().trim().min(1, "Give the leg a name.").max(80);

const FAR_SHIFT = "A stop line is moved by 60 m at most.";
const ODD_LIMIT = "A speed limit lies between 5 and 150 km/h.";
const ODD_STORAGE = "A storage length lies between 5 and 5,000 m.";
const ODD_LANES = "A leg has 1 to 12 lanes.";

export const EditLeg = z.object({
  legId: LegId,
  name: Name.optional(),
  /** Metres to move the stop line upstream; negative towards the junction. */
  stopLineShiftM: z.number().min(-60, FAR_SHIFT).max(60, FAR_SHIFT).optional(),
  /** Null takes the limit away. */
  speedLimitKmh: z.number().min(5, ODD_LIMIT).max(150, ODD_LIMIT).nullable().optional(),
  /** Null goes back to what the street between the junctions gives. */
  storageM: z.number().min(5, ODD_STORAGE).max(5000, ODD_STORAGE).nullable().optional(),
  lanes: z.number().int(ODD_LANES).min(1, ODD_LANES).max(12, ODD_LANES).nullable().optional(),
  locked: z.boolean().optional(),
});
export type EditLeg = z.infer<typeof EditLeg>;

export const AddLeg = z.object({ junctionId: LegId, name: Name, line: Line });
export type AddLeg = z.infer<typeof AddLeg>;

export const SplitLeg = z.object({ legId: LegId, first: Line, second: Line });
export type SplitLeg = z.infer<typeof SplitLeg>;

export const MergeLegs = z
  .object({ keepId: LegId, dropId: LegId })
  .refine((input) => input.keepId !== input.dropId, { message: "Choose two different legs.", path: ["dropId"] });
export type MergeLegs = z.infer<typeof MergeLegs>;
