import { readdir } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { text } from "node:stream/consumers";
import { gzipSync } from "node:zlib";
import { count } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { ingestPieces, legs } from "@/db/schema";
import { prepareQueues } from "@/jobs/queue";
import { JOBS } from "@/jobs/definitions";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { getUpload, openRejects } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import type { Storage } from "@/storage/storage";
import { crossingPings } from "@tests/support/crossing";
import { readCrossing } from "@tests/support/crossing-city";
import { testContext, testPlace, type TestContext } from "@tests/support/database";
import { forgetResults, resultChecksums, type Checksums } from "@tests/support/result-checksums";

let engineer: TestContext;
let job: TestContext;

/** 12,000 rows of two days, some of them no pings, among them one on the first and one on the last line. */
function pings(): string[] {
  const days = ["2026-03-03T08:00:00Z", "2026-03-03T23:30:00Z"].map((start) => crossingPings({ vehicles: 400, pingS: 4, startMs: Date.parse(start) }).trim().split("\n"));
  const lines = [...days[0], ...days[1].slice(1)];
  for (const at of [1, 3000, 3001, 9000, lines.length + 4]) lines.splice(at, 0, "v1,not a time,45.6,-38.3,10,0");
  return lines;
}

async function received(name: string, content: string | Buffer): Promise<() => Promise<string>> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind: "pings", name }, Readable.from([Buffer.from(content)]));
  return async () => {
    await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
    return uploadId;
  };
}

/** Reads the file as it would be read with pieces of so many rows, and forgets it again. */
async function readWith(pieceRows: number, start: () => Promise<string>): Promise<{ sums: Checksums; rejects: string }> {
  const uploadId = await start();
  await ingestUpload({ ...job, pieceRows }, { uploadId });
  expect(await getUpload(engineer, { uploadId })).toMatchObject({ state: "done", failure: null });
  const read = { sums: await resultChecksums(job.db), rejects: await text(await openRejects(engineer, { uploadId })) };
  await forgetResults(job.db);
  return read;
}

const ALONE = 1_000_000;
const SMALL = 500;

beforeAll(async () => {
  await prepareQueues((await testPlace()).url, JOBS);
  engineer = await testContext("engineer");
  job = await testContext("job");
  await readCrossing(engineer, job);
});

async function nothingLeft(): Promise<void> {
  expect(await job.db.select({ n: count() }).from(ingestPieces)).toEqual([{ n: 0 }]);
  const { folder } = await testPlace();
  expect(await readdir(join(folder, "pieces")).catch(() => [])).toEqual([]);
}

describe("legs that are matched anew in pieces", () => {
  it("come out as when they are matched at once", async () => {
    const start = await received("rematch.csv", pings().join("\n"));
    const rematched = async (pieceRows: number): Promise<Checksums> => {
      await ingestUpload(job, { uploadId: await start() });
      const [leg] = await job.db.select().from(legs).orderBy(legs.id);
      await editLeg(engineer, { legId: leg.id, stopLineShiftM: 2 });
      await reprocessLegs({ ...job, pieceRows }, { junctionIds: [leg.junctionId] });
      const sums = await resultChecksums(job.db);
      await forgetResults(job.db);
      return sums;
    };
    const whole = await rematched(ALONE);
    expect(whole.traversals.rows).toBe(800);
    expect(await rematched(SMALL)).toEqual(whole);
    await nothingLeft();
  });
});

describe("a file that is read in pieces", () => {
  it("comes out as one that is read at once, to the last byte, and leaves no piece behind", async () => {
    const start = await received("plain.csv", `${pings().join("\n")}\n`);
    const whole = await readWith(ALONE, start);
    expect(whole.sums.traversals.rows).toBe(800);
    expect(whole.rejects.trim().split("\n").map((line) => line.split(",")[0])).toEqual(["line", "2", "3001", "3002", "9001", expect.stringMatching(/^1\d{4}$/)]);
    expect(await readWith(SMALL, start)).toEqual(whole);
    expect(await readWith(1700, start)).toEqual(whole);
    await nothingLeft();
  });

  it.each([
    ["CRLF, a byte order mark, semicolons and no line end at the end", () => `\ufeff${pings().join("\r\n").replaceAll(",", ";")}`],
    ["no header", () => pings().slice(1).join("\n")],
    ["empty lines, at the beginning too", () => `\n\n${pings().join("\n\n")}\n`],
    ["quotation marks on one line in the middle", () => pings().map((line, i) => (i === 7000 ? line.replace(/^(\w+)/, '"$1"') : line)).join("\n")],
    ["quotation marks everywhere", () => pings().map((line) => line.split(",").map((field) => `"${field}"`).join(",")).join("\n")],
    ["a field in every row that goes on over a line end", () => pings().map((line, i) => (i === 0 ? `${line},note` : line.startsWith("v1,not") ? `${line},` : `${line},"one\ntwo, three"`)).join("\n")],
    ["gzip", () => gzipSync(pings().join("\n"))],
  ])("with %s", async (_, content) => {
    const start = await received("odd.csv", content());
    const whole = await readWith(ALONE, start);
    expect(whole.sums.traversals.rows).toBe(800);
    expect(await readWith(SMALL, start)).toEqual(whole);
    await nothingLeft();
  });
});

describe("pieces for which there is no room", () => {
  it("fail the file by a sentence, and leave none behind", async () => {
    const uploadId = await (await received("full.csv", pings().join("\n")))();
    let puts = 0;
    const full: Storage = {
      ...job.storage,
      async put(key, content) {
        if (key.startsWith("pieces/") && ++puts > 5) throw Object.assign(new Error("ENOSPC: no space left on device, write"), { code: "ENOSPC" });
        return job.storage.put(key, content);
      },
    };
    await ingestUpload({ ...job, pieceRows: SMALL, storage: full }, { uploadId });
    expect(await getUpload(engineer, { uploadId })).toMatchObject({ state: "failed", hasRejects: false });
    expect((await getUpload(engineer, { uploadId })).failure).toContain("There is no room left for files on the server");
    await nothingLeft();
  });
});
