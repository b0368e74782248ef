import { arterialScenario } from "./arterial";
import { gridScenario } from "./grid";
import { oddScenario } from "./odd";
import type { Scenario } from "./types";

/** Scenarios to tune on. */
export const TUNING: Scenario[] = [gridScenario(), arterialScenario(), oddScenario()];

/** Kept aside while the core was tuned. */
export const HOLD_OUT: Scenario[] = [];
