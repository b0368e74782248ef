import { z } from "zod";
import { REJECT_REASONS } from "./upload";

/** Unpacked size of one batch; suppliers send every few minutes. */
export const MAX_BATCH_BYTES = 20_000_000;
/** Batches that one token may send in a minute. */
export const BATCHES_PER_MINUTE = 60;
/** Batches wait this long for others, so that they are read in together. */
export const COLLECT_S = 180;

/** One line of a batch in NDJSON; the same rules hold for the columns of a CSV batch. */
export const FeedPing = z.object({
  vehicle_id: z.string().min(1).max(200).describe("The supplier's name of the vehicle; only a keyed hash of it is kept with the results."),
  timestamp: z
    .union([z.iso.datetime({ offset: true }), z.number()])
    .describe("Text: ISO 8601 with a zone. Number: milliseconds since 1970-01-01 UTC."),
  lat: z.number().min(-90).max(90).describe("Degrees north, WGS 84."),
  lon: z.number().min(-180).max(180).describe("Degrees east, WGS 84."),
  speed_kmh: z.number().min(0).nullish().describe("Speed over ground, km/h."),
  heading: z.number().min(-180).max(360).nullish().describe("Degrees clockwise from true north."),
});
export type FeedPing = z.infer<typeof FeedPing>;

export const FeedReceipt = z.object({
  batch: z.uuid().nullable().describe("Null where no row was accepted: nothing was kept."),
  accepted: z.number().int().min(0),
  rejected: z.number().int().min(0),
  repeated: z.boolean().describe("The batch had come before and was not counted again."),
  reasons: z.array(z.object({ reason: z.enum(REJECT_REASONS), rows: z.number().int().min(1), explanation: z.string() })),
  samples: z
    .array(z.object({ line: z.number().int().min(1), reason: z.enum(REJECT_REASONS), text: z.string() }))
    .describe("The first rejected rows, cut at 200 characters."),
});
export type FeedReceipt = z.infer<typeof FeedReceipt>;

export const MakeFeedToken = z.object({ supplier: z.string().trim().min(1, "Name the supplier.").max(80) });
export type MakeFeedToken = z.infer<typeof MakeFeedToken>;

export interface FeedTokenView {
  id: string;
  supplier: string;
  by: string | null;
  createdAt: string;
  lastUsedAt: string | null;
  revokedAt: string | null;
}
