"use server";

import { action } from "@/server/action";
import { editLeg } from "@/services/legs/edit-leg";
import { addLeg, mergeLegs, splitLeg } from "@/services/legs/redraw-legs";

export const editLegAction = action(editLeg);
export const mergeLegsAction = action(mergeLegs);
export const splitLegAction = action(splitLeg);
export const addLegAction = action(addLeg);
