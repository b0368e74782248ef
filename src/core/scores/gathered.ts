import type { CatalogueIndex } from "./catalogue-index";
import { createLevel, type DelayLevel } from "./delay-level";
import { createTally, type Clusters, type RatioTally } from "./ratio-tally";

/** All that one screen adds up, by the dense numbers of the catalogue index. */
export interface GatheredScreen {
  movements: DelayLevel;
  legs: DelayLevel;
  junctions: DelayLevel;
  /** Of legs: seconds spilled by seconds observed. */
  spill: RatioTally;
  /** Of legs; NaN where nothing was seen. */
  reachP95M: Float64Array;
  /** Of junctions; NaN where too few were seen. */
  medianS: Float64Array;
  p95S: Float64Array;
  /** Distinct vehicles, counted as far as evidence asks for them. */
  distinct: Record<"movements" | "legs" | "junctions", Uint8Array>;
  traversals: number;
}

/** A window of the day in quarters. */
export interface QuarterWindow {
  from: number;
  to: number;
}

/** Nothing added up yet. */
export function emptyScreen(index: CatalogueIndex, clusters: Clusters): GatheredScreen {
  const units = { movements: index.movements.length, legs: index.legs.length, junctions: index.junctions.length };
  return {
    movements: createLevel(units.movements, clusters),
    legs: createLevel(units.legs, clusters),
    junctions: createLevel(units.junctions, clusters),
    spill: createTally(units.legs, clusters),
    reachP95M: new Float64Array(units.legs),
    medianS: new Float64Array(units.junctions).fill(NaN),
    p95S: new Float64Array(units.junctions).fill(NaN),
    distinct: { movements: new Uint8Array(units.movements), legs: new Uint8Array(units.legs), junctions: new Uint8Array(units.junctions) },
    traversals: 0,
  };
}
