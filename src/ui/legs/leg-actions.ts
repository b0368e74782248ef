import type { ActionResult } from "@/domain/errors";
import type { AddLeg, EditLeg, MergeLegs, SplitLeg } from "@/domain/leg-check";

/** What a page hands to the forms; each is refused by the server where the role does not allow it. */
export interface LegActions {
  edit: (input: EditLeg) => Promise<ActionResult<{ rematching: boolean }>>;
  merge: (input: MergeLegs) => Promise<ActionResult<void>>;
  split: (input: SplitLeg) => Promise<ActionResult<{ legId: number }>>;
  add: (input: AddLeg) => Promise<ActionResult<{ legId: number }>>;
}
