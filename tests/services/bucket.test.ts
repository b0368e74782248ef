import { Readable } from "node:stream";
import { text } from "node:stream/consumers";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { UploadKind } from "@/domain/upload";
import { makeFeedToken } from "@/services/feed/feed-tokens";
import { receiveBatch } from "@/services/feed/receive-batch";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { discardUpload } from "@/services/uploads/discard-upload";
import { getUpload, openRejects } from "@/services/uploads/get-upload";
import { listUploads } from "@/services/uploads/list-uploads";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { openBucket, type FilePlace } from "@tests/support/bucket";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let bucket: FilePlace;
let engineer: TestContext;
let job: TestContext;

beforeAll(async () => {
  bucket = await openBucket();
  engineer = await testContext("engineer", { storage: bucket.storage });
  job = await testContext("job", { storage: bucket.storage });
  await read("junctions", "junctions.csv", JUNCTIONS_CSV);
});

afterAll(() => bucket.close());

async function read(kind: UploadKind, name: string, content: string | Buffer): Promise<string> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
  return uploadId;
}

describe("with the files in a bucket", () => {
  it("a file is read in, its rejected rows can be fetched, a discarded one goes", async () => {
    const lines = crossingPings({ vehicles: 400, pingS: 1 }).split("\n");
    lines.splice(3, 0, "v1,not a time,45.6,-38.3,10,0");
    const uploadId = await read("pings", "day.csv.gz", gzipSync(lines.join("\n")));
    expect(await getUpload(engineer, { uploadId })).toMatchObject({ state: "done", report: { traversals: 400, rejected: { time: 1 } } });
    expect(await text(await openRejects(engineer, { uploadId }))).toContain("4,time,");
    expect(await bucket.listed()).toEqual(expect.arrayContaining([`uploads/${uploadId}`, `uploads/${uploadId}-rejected.csv`]));

    const wrong = await receiveUpload(engineer, { kind: "pings", name: "wrong.csv" }, Readable.from([Buffer.from("a,b\n1,2\n")]));
    expect(await bucket.listed()).toContain(`uploads/${wrong.uploadId}`);
    await discardUpload(engineer, { uploadId: wrong.uploadId });
    expect(await bucket.listed()).not.toContain(`uploads/${wrong.uploadId}`);
  });

  it("a large file is read in pieces, of which none is left", async () => {
    const { uploadId, detected } = await receiveUpload(engineer, { kind: "pings", name: "large.csv" }, Readable.from([Buffer.from(crossingPings({ vehicles: 200, startMs: Date.parse("2026-03-07T08:00:00Z") }))]));
    await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: "Harbour Fleet" });
    await ingestUpload({ ...job, pieceRows: 400 }, { uploadId });
    expect(await getUpload(engineer, { uploadId })).toMatchObject({ state: "done", report: { traversals: 200 } });
    const kept = await bucket.listed();
    expect(kept).toContain(`edges/${uploadId}/last-0`);
    expect(kept.filter((key) => key.startsWith("pieces/"))).toEqual([]);
  });

  it("the batches of a feed are joined", async () => {
    const { token } = await makeFeedToken(engineer, { supplier: "Harbour Taxis" });
    const machine = await testContext("nobody", { storage: bucket.storage, now: new Date("2026-03-09T08:40:00Z") });
    const [header, ...rows] = crossingPings({ vehicles: 40, startMs: Date.parse("2026-03-09T08:30:00Z") }).trim().split("\n");
    for (const part of [0, 1, 2]) {
      const batch = [header, ...rows.filter((_, i) => i % 3 === part)].join("\n");
      await receiveBatch(machine, { authorization: `Bearer ${token}`, idempotencyKey: null }, Readable.from([Buffer.from(batch)]));
    }
    const hour = (await listUploads(engineer)).find((upload) => upload.supplier === "Harbour Taxis");
    await ingestUpload(job, { uploadId: String(hour?.id) });
    expect(await getUpload(engineer, { uploadId: String(hour?.id) })).toMatchObject({ state: "done", report: { accepted: rows.length, traversals: 40 } });
  });
});
