/**
 * Where the cells of a strip lie. Cell = row * columns + column. Row r holds distances from
 * bottomM + r * cellM up to, but not including, the next row's. Column c holds the times that, led along
 * the backward wave to the stop line, fall from startS + c * cellS up to, but not including, the next.
 */
export interface StripSpec {
  /** Seconds after local midnight at which column 0 begins at the stop line. */
  startS: number;
  cellS: number;
  columns: number;
  /** Distance to the stop line at which row 0 begins, metres; negative past the stop line. */
  bottomM: number;
  cellM: number;
  rows: number;
  /** Speed of the backward wave along which cells lean, m/s; Infinity for rectangles. */
  waveMs: number;
}

/** Totals of all trajectories clipped to each cell (Edie 1963). Row-major: cell = row * columns + column. */
export interface Strip {
  spec: StripSpec;
  /** Metres travelled towards the stop line; negative where noise moved vehicles back. */
  distanceM: Float64Array;
  /** Vehicle-seconds spent. */
  timeS: Float64Array;
  /** Distinct tracks that spent time in the cell. */
  vehicles: Uint32Array;
  /** Distinct local days among them. */
  days: Uint16Array;
}

/** Part of time and distance that a strip shows. */
export interface StripWindow {
  fromS: number;
  toS: number;
  bottomM: number;
  topM: number;
}

/** Throws RangeError for sizes that make no grid. */
export function createStrip(spec: StripSpec): Strip {
  const { cellS, cellM, columns, rows, waveMs } = spec;
  const isGrid = cellS > 0 && cellM > 0 && columns > 0 && rows > 0 && Number.isInteger(columns) && Number.isInteger(rows);
  if (!isGrid) throw new RangeError(`No strip has ${columns} columns of ${cellS} s and ${rows} rows of ${cellM} m.`);
  if (!(waveMs > 0)) throw new RangeError(`The backward wave needs a positive speed, got ${waveMs}.`);
  const cells = columns * rows;
  return {
    spec,
    distanceM: new Float64Array(cells),
    timeS: new Float64Array(cells),
    vehicles: new Uint32Array(cells),
    days: new Uint16Array(cells),
  };
}

/**
 * The grid that covers a window: rows aligned with the stop line, so that no cell spans it, and as many
 * leaning columns as it takes to fill the window's corners. A column begins at `fromS` at the stop line.
 */
export function specOfWindow(window: StripWindow, cellS: number, cellM: number, waveMs = Infinity): StripSpec {
  const bottomRow = Math.floor(window.bottomM / cellM);
  const topRow = Math.ceil(window.topM / cellM);
  const before = Math.ceil(Math.max(0, (topRow * cellM) / waveMs) / cellS);
  const after = Math.ceil(Math.max(0, (-bottomRow * cellM) / waveMs) / cellS);
  return {
    startS: window.fromS - before * cellS,
    cellS,
    columns: before + Math.ceil((window.toS - window.fromS) / cellS) + after,
    bottomM: bottomRow * cellM,
    cellM,
    rows: topRow - bottomRow,
    waveMs,
  };
}

/** Cell that holds a moment and a distance; -1 outside the strip and for NaN. */
export function cellAt(spec: StripSpec, tS: number, sM: number): number {
  const column = Math.floor((tS - sM / spec.waveMs - spec.startS) / spec.cellS);
  const row = Math.floor((sM - spec.bottomM) / spec.cellM);
  const isInside = column >= 0 && column < spec.columns && row >= 0 && row < spec.rows;
  return isInside ? row * spec.columns + column : -1;
}

/** Middle of a cell: seconds after local midnight and metres to the stop line. */
export function cellCentre(spec: StripSpec, cell: number): { tS: number; sM: number } {
  const column = cell % spec.columns;
  const row = (cell - column) / spec.columns;
  const sM = spec.bottomM + (row + 0.5) * spec.cellM;
  return { tS: spec.startS + (column + 0.5) * spec.cellS + sM / spec.waveMs, sM };
}

/** Edie's space-mean speed of each cell in m/s, total distance by total time; NaN where no vehicle was seen. */
export function speedsOf(strip: Strip, out = new Float32Array(strip.timeS.length)): Float32Array {
  for (let i = 0; i < out.length; i++) out[i] = strip.timeS[i] > 0 ? strip.distanceM[i] / strip.timeS[i] : NaN;
  return out;
}
