import { Readable } from "node:stream";
import { beforeAll, describe, expect, it } from "vitest";
import { decodeTrackSet } from "@/core/strips/track-set";
import { legs } from "@/db/schema";
import { StripQuery } from "@/domain/junction";
import { CitySettings } from "@/domain/settings";
import type { UploadKind } from "@/domain/upload";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { writeSettings } from "@/services/settings/get-settings";
import { getTracks } from "@/services/strips/get-tracks";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

async function upload(kind: UploadKind, name: string, content: string): Promise<void> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await writeSettings(job.db, CitySettings.parse({ timeZone: "Europe/Berlin" }), new Date());
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
});

describe("the day on which clocks go forward", () => {
  it("places tracks by the clock on the wall, not by the hours since midnight", async () => {
    // 07:00 UTC is 09:00 summer time; since local midnight only eight hours have gone by.
    await upload("pings", "sunday.csv", crossingPings({ startMs: Date.parse("2026-03-29T07:00:00Z"), vehicles: 80 }));
    const [{ id }] = await job.db.select({ id: legs.id }).from(legs);
    const query = StripQuery.parse({ days: "sunday", from: 540, to: 600 });
    const set = decodeTrackSet((await getTracks(engineer, { legId: id, query })).buffer);
    expect(set.tracks).toBe(20);
    // All 80 start within 16 minutes.
    for (const enterS of set.enterS) {
      expect(enterS).toBeGreaterThanOrEqual(9 * 3600);
      expect(enterS).toBeLessThan(9 * 3600 + 20 * 60);
    }
  });
});
