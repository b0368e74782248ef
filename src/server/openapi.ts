import { z } from "zod";
import { ERROR_CODES } from "@/domain/errors";
import { BATCHES_PER_MINUTE, COLLECT_S, FeedPing, FeedReceipt, MAX_BATCH_BYTES } from "@/domain/feed";

const Problem = z.object({
  code: z.enum(ERROR_CODES),
  message: z.string().describe("A sentence for a person."),
});

const NDJSON_EXAMPLE = [
  { vehicle_id: "bus-7", timestamp: "2026-03-03T08:00:00Z", lat: 45.6012, lon: -38.3004, speed_kmh: 31.5, heading: 92 },
  { vehicle_id: "bus-7", timestamp: 1772524805000, lat: 45.6012, lon: -38.2998 },
];
const CSV_EXAMPLE = "vehicle_id,timestamp,lat,lon,speed_kmh,heading\nbus-7,2026-03-03T08:00:00Z,45.6012,-38.3004,31.5,92\n";

const DESCRIPTION = [
  `Send pings every few minutes, at most ${MAX_BATCH_BYTES / 1e6} MB unpacked in a batch and ${BATCHES_PER_MINUTE} batches a minute.`,
  "The body is one JSON object a line or CSV with a header row, as it is or packed with gzip.",
  "Rows that are no pings are counted and named in the answer; the others are kept.",
  "A batch that is sent again, by its bytes or by its idempotency key, counts once: after a failure send it again as it was.",
  `The pings show in the figures some minutes later (${COLLECT_S / 60} at the least), joined with those of the batches before and after.`,
].join(" ");

/** The interface for suppliers' machines, in the terms of OpenAPI 3.1; its schemas are the ones that the application checks by. */
export function openApiDocument(baseUrl: string) {
  return {
    openapi: "3.1.0",
    info: { title: "Tailmark feed", version: "1.0.0", description: "How a supplier of floating-car data hands over pings as they come." },
    servers: [{ url: baseUrl }],
    paths: {
      "/api/v1/pings": {
        post: {
          operationId: "sendPings",
          summary: "Send a batch of pings",
          description: DESCRIPTION,
          security: [{ feedToken: [] }],
          parameters: [
            { name: "idempotency-key", in: "header", required: false, schema: { type: "string", minLength: 1, maxLength: 200 }, description: "Your own name of the batch." },
            { name: "content-encoding", in: "header", required: false, schema: { type: "string", enum: ["gzip"] } },
          ],
          requestBody: {
            required: true,
            content: {
              "application/x-ndjson": { schema: schemaRef("Ping"), example: NDJSON_EXAMPLE.map((ping) => JSON.stringify(ping)).join("\n") },
              "text/csv": { schema: { type: "string" }, example: CSV_EXAMPLE },
            },
          },
          responses: {
            "200": answer("The batch had come before, or no row of it could be used: nothing new was kept.", "Receipt"),
            "202": answer("The accepted rows are kept and will be read in.", "Receipt"),
            "400": answer("The batch cannot be read at all; nothing was kept.", "Problem"),
            "401": answer("The token is missing, unknown or revoked.", "Problem"),
            "409": answer("The idempotency key belongs to another batch.", "Problem"),
            "429": answer("Too many batches in this minute: wait as many seconds as retry-after says.", "Problem"),
            "507": answer("There is no room left: send the batch again later.", "Problem"),
          },
        },
      },
    },
    components: {
      securitySchemes: { feedToken: { type: "http", scheme: "bearer", description: "Made on the Data page for each supplier." } },
      schemas: { Ping: schemaOf(FeedPing), Receipt: schemaOf(FeedReceipt), Problem: schemaOf(Problem) },
    },
  };
}

function schemaRef(name: string) {
  return { $ref: `#/components/schemas/${name}` };
}

function answer(description: string, schema: string) {
  return { description, content: { "application/json": { schema: schemaRef(schema) } } };
}

/** The document says the dialect. What is accepted is described, not what is left of it. */
function schemaOf(schema: z.ZodType): Record<string, unknown> {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io: "input" });
  return rest;
}
