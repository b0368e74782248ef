import { Readable } from "node:stream";
import { eq } from "drizzle-orm";
import { beforeAll, expect, it } from "vitest";
import { METHOD_VERSION } from "@/core/method-version";
import { screenDays } from "@/db/schema";
import { ScreenQuery } from "@/domain/screen";
import type { UploadKind } from "@/domain/upload";
import { raiseDataVersion } from "@/services/catalogue/catalogue";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { getUpload } from "@/services/uploads/get-upload";
import { readOutdatedAgain } from "@/services/uploads/read-outdated-again";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;
let uploadId: string;

async function upload(kind: UploadKind, name: string, content: string): Promise<string> {
  const received = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId: received.uploadId, mapping: received.detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId: received.uploadId });
  return received.uploadId;
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
  uploadId = await upload("pings", "monday.csv", crossingPings({ vehicles: 60 }));
});

it("a file that an earlier method has read counts nowhere until it is read in again, and then as it would have", async () => {
  const traversals = async () => (await rankJunctions(engineer, ScreenQuery.parse({ period: "all", days: "every" }))).basis.traversals;
  const before = await traversals();
  expect(before).toBeGreaterThan(0);
  expect(await readOutdatedAgain(job)).toBe(0);

  await job.db.update(screenDays).set({ methodVersion: METHOD_VERSION - 1 }).where(eq(screenDays.uploadId, uploadId));
  // As every change of the figures does.
  await raiseDataVersion(job.db);
  expect(await traversals()).toBe(0);

  expect([await readOutdatedAgain(job), await readOutdatedAgain(job)]).toEqual([1, 0]);
  expect((await getUpload(engineer, { uploadId })).state).toBe("waiting");
  await ingestUpload(job, { uploadId });
  expect((await getUpload(engineer, { uploadId })).state).toBe("done");
  expect(await traversals()).toBe(before);
  await expect(readOutdatedAgain(engineer)).rejects.toThrow("by the system only");
});
