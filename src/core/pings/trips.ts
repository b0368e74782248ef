/** Cleaned pings, grouped into trips; trips are in the order of their first ping's time and place. */
export interface Trips {
  /** Pings. */
  length: number;
  tMs: Float64Array;
  lat: Float64Array;
  lon: Float64Array;
  /** Reported, else from displacement; NaN only for a trip of one ping without a reported speed. */
  speedMs: Float32Array;
  /** Direction of travel: reported while moving, else from displacement, for a standstill that across it; NaN where neither tells. */
  headingDeg: Float32Array;
  /** Trips. */
  count: number;
  /** Pings of trip k are tripOffset[k] to tripOffset[k + 1] - 1. */
  tripOffset: Uint32Array;
  tripVehicle: Uint32Array;
  /** Median seconds between the pings of each trip; NaN for a single ping. */
  tripIntervalS: Float32Array;
  /** 1 where most pings of a trip carry a reported speed. */
  tripHasSpeed: Uint8Array;
  /** True where most pings carry a reported speed. */
  hasSpeed: boolean;
  hasHeading: boolean;
  /** Median seconds between successive pings of a trip; NaN without any pair. */
  medianIntervalS: number;
}

/** Columns for so many pings, to be filled. O(length). */
export function tripColumns(length: number): Pick<Trips, "length" | "tMs" | "lat" | "lon" | "speedMs" | "headingDeg"> {
  return {
    length,
    tMs: new Float64Array(length),
    lat: new Float64Array(length),
    lon: new Float64Array(length),
    speedMs: new Float32Array(length),
    headingDeg: new Float32Array(length),
  };
}
