/** Which owners claim a position: slot n is claimed by owners[offsets[n]] to owners[offsets[n + 1]], ascending. */
export interface ClaimIndex {
  /** Slot of a position, -1 where nobody claims it. */
  find(lat: number, lon: number): number;
  offsets: Uint32Array;
  owners: Uint32Array;
}

/** Discs that owners claim: centre in degrees, radius in metres. */
export interface Claims {
  length: number;
  lat: Float64Array;
  lon: Float64Array;
  radiusM: Float64Array;
  owner: Uint32Array;
}

/**
 * Builds look-ups from positions to what lies near them, in O(1) for each position.
 * A position inside a disc must find the disc's owner; a position a little outside may find it too,
 * so callers test the distance themselves.
 */
export interface JunctionIndex {
  claim(claims: Claims): ClaimIndex;
}
