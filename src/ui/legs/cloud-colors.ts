import { COLORS, rampColor, speedColor, type ScaleStep } from "@/ui/scales";

/** How pings are drawn on the plan. */
export const CLOUD_STYLES = ["direction", "speed", "hidden"] as const;
export type CloudStyle = (typeof CLOUD_STYLES)[number];

/** Direction of travel as a closed ring of hues that differ in lightness too; none means good or bad. */
export const DIRECTION_RING: readonly ScaleStep[] = [
  { from: 0, color: "#2F4E93" },
  { from: 90, color: "#8E3A7D" },
  { from: 180, color: "#B5713F" },
  { from: 270, color: "#3F8C9B" },
  { from: 360, color: "#2F4E93" },
];

/** A vehicle at this speed counts as free on the plan, m/s: about 50 km/h. */
export const FREE_MS = 14;
/** The ramp's free end is as light as the sheet: pings take its darker part. */
export const RAMP_SHARE = 0.86;

export function directionColor(headingDeg: number | null): string {
  return headingDeg === null ? COLORS.inkSoft : rampColor(DIRECTION_RING, ((headingDeg % 360) + 360) % 360);
}

export function pingSpeedColor(speedMs: number | null): string {
  return speedMs === null ? COLORS.inkSoft : speedColor(Math.min(1, speedMs / FREE_MS) * RAMP_SHARE);
}
