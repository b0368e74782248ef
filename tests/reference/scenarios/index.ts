import { arterialScenario } from "./arterial";
import { gridScenario } from "./grid";
import type { Scenario } from "./types";

/** Scenarios to tune on. */
export const TUNING: Scenario[] = [gridScenario(), arterialScenario()];

/** Kept aside while the core was tuned. */
export const HOLD_OUT: Scenario[] = [];
