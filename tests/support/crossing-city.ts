import { Readable } from "node:stream";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { JUNCTIONS_CSV } from "./crossing";
import type { TestContext } from "./database";

/** Reads the one junction of the crossing in. */
export async function readCrossing(engineer: TestContext, job: TestContext): Promise<void> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind: "junctions", name: "junctions.csv" }, Readable.from([Buffer.from(JUNCTIONS_CSV)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
}
