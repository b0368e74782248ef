import { z } from "zod";

/** Minutes after local midnight, in quarters of an hour; `to` is exclusive. */
export const TimeWindow = z
  .object({
    fromMin: z.number().int().min(0).max(1425).multipleOf(15),
    toMin: z.number().int().min(15).max(1440).multipleOf(15),
  })
  .refine((w) => w.fromMin < w.toMin, { message: "The window must end after it begins.", path: ["toMin"] });

export const CitySettings = z.object({
  cityName: z.string().trim().min(1).max(80).default("My city"),
  timeZone: z
    .string()
    .refine(isTimeZone, { message: "Not a time zone that this server knows." })
    .default("UTC"),
  driveSide: z.enum(["right", "left"]).default("right"),
  units: z.enum(["metric", "us"]).default("metric"),
  periods: z
    .object({ am: TimeWindow, midday: TimeWindow, pm: TimeWindow, evening: TimeWindow })
    .default({
      am: { fromMin: 390, toMin: 570 },
      midday: { fromMin: 690, toMin: 810 },
      pm: { fromMin: 960, toMin: 1110 },
      evening: { fromMin: 1140, toMin: 1380 },
    }),
});
export type CitySettings = z.infer<typeof CitySettings>;

export function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat("en", { timeZone: name });
    return true;
  } catch {
    return false;
  }
}
