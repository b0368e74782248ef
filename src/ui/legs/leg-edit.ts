import type { EditLeg, LegOfCheck } from "@/domain/leg-check";
import type { Units } from "@/ui/format";
import { kmhFromSpeed, lengthText, metresFromLength, speedText, typedNumber } from "./leg-units";

/** The form as it stands: texts as typed, in the city's units. */
export interface LegTexts {
  name: string;
  speedLimit: string;
  storage: string;
  lanes: string;
  locked: boolean;
}

export function textsOf(leg: LegOfCheck, units: Units): LegTexts {
  return {
    name: leg.name,
    speedLimit: speedText(leg.speedLimitMs, units),
    storage: lengthText(leg.storageM, units),
    lanes: leg.lanes === null ? "" : String(leg.lanes),
    locked: leg.locked,
  };
}

/** What of the form differs from the leg: only that is sent, so that the rest keeps its own precision. */
export function changesOf(leg: LegOfCheck, texts: LegTexts, shiftM: number, units: Units): EditLeg | null {
  const before = textsOf(leg, units);
  const number = (text: string, from: (value: number, units: Units) => number) => {
    const value = typedNumber(text);
    return value === null ? null : from(value, units);
  };
  const edit: EditLeg = { legId: leg.id };
  if (texts.name !== before.name) edit.name = texts.name;
  if (texts.speedLimit !== before.speedLimit) edit.speedLimitKmh = number(texts.speedLimit, kmhFromSpeed);
  if (texts.storage !== before.storage) edit.storageM = number(texts.storage, metresFromLength);
  if (texts.lanes !== before.lanes) edit.lanes = number(texts.lanes, (value) => value);
  if (texts.locked !== before.locked) edit.locked = texts.locked;
  if (shiftM !== 0) edit.stopLineShiftM = shiftM;
  return Object.keys(edit).length > 1 ? edit : null;
}

/** Sentences for fields that hold no number, by field of the form. */
export function typingFaults(texts: LegTexts): Partial<Record<keyof LegTexts, string>> {
  const faults: Partial<Record<keyof LegTexts, string>> = {};
  if (texts.name.trim() === "") faults.name = "Give the leg a name.";
  for (const field of ["speedLimit", "storage", "lanes"] as const) {
    if (Number.isNaN(typedNumber(texts[field]))) faults[field] = "This is not a number.";
  }
  return faults;
}
