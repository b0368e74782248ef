/** A colour scale is data: map, table, strip, legend and picture export read the same steps. */
export interface ScaleStep {
  /** The step holds values from here up to the next step's `from`. */
  from: number;
  color: string;
}

/** No data has a colour of its own, which is on no scale. */
export const NO_DATA_COLOR = "#B8B6B0";

export const COLORS = {
  paper: "#F6F3EC",
  sheet: "#FFFDF8",
  ink: "#16213A",
  inkSoft: "#55607A",
  rule: "#D9D2C3",
  tail: "#C43E1C",
  pick: "#0B6E69",
  pickWash: "#E7EFEB",
} as const;

/**
 * Mean control delay, seconds per vehicle: one hue, light to dark. The steps are the bounds of level of
 * service A to F at signalised junctions (Highway Capacity Manual, 7th edition, Exhibit 19-8).
 */
export const DELAY_SCALE: readonly ScaleStep[] = [
  { from: 0, color: "#E3D2AF" },
  { from: 10, color: "#CDAF88" },
  { from: 20, color: "#B38966" },
  { from: 35, color: "#936146" },
  { from: 55, color: "#703A28" },
  { from: 80, color: "#48150D" },
];

/** Speed from stopped to free, as shares of free speed from 0 to 1. */
export const SPEED_RAMP: readonly ScaleStep[] = [
  { from: 0, color: "#2D0B3F" },
  { from: 0.2, color: "#6B1F63" },
  { from: 0.4, color: "#B43C6B" },
  { from: 0.6, color: "#E57A64" },
  { from: 0.8, color: "#F6BE84" },
  { from: 1, color: "#FBEFD2" },
];

/** Colour of the step that holds the value; values below the first step take the first. */
export function stepColor(scale: readonly ScaleStep[], value: number | null | undefined): string {
  if (value === null || value === undefined || Number.isNaN(value)) return NO_DATA_COLOR;
  let color = scale[0].color;
  for (const step of scale) if (value >= step.from) color = step.color;
  return color;
}

export function delayColor(delayS: number | null | undefined): string {
  return stepColor(DELAY_SCALE, delayS);
}

/** Colour between the two neighbouring steps, mixed in sRGB; clamped at both ends. */
export function rampColor(scale: readonly ScaleStep[], value: number | null | undefined): string {
  if (value === null || value === undefined || Number.isNaN(value)) return NO_DATA_COLOR;
  const next = scale.findIndex((step) => step.from >= value);
  if (next === 0) return scale[0].color;
  if (next === -1) return scale[scale.length - 1].color;
  const [low, high] = [scale[next - 1], scale[next]];
  return mix(low.color, high.color, (value - low.from) / (high.from - low.from));
}

/** Share of free speed, 0 stopped to 1 free. */
export function speedColor(shareOfFree: number | null | undefined): string {
  return rampColor(SPEED_RAMP, shareOfFree);
}

function mix(a: string, b: string, share: number): string {
  const channel = (at: number) => {
    const [from, to] = [a, b].map((color) => parseInt(color.slice(at, at + 2), 16));
    return Math.round(from + (to - from) * share)
      .toString(16)
      .padStart(2, "0");
  };
  return `#${channel(1)}${channel(3)}${channel(5)}`.toUpperCase();
}
