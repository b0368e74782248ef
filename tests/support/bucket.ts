import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { ListObjectsV2Command, S3Client } from "@aws-sdk/client-s3";
import S3rver from "s3rver";
import { readEnv } from "@/env";
import { openStorage } from "@/storage/open-storage";
import type { Storage } from "@/storage/storage";

const BUCKET = "tailmark-files";
const KEYS = { accessKeyId: "S3RVER", secretAccessKey: "S3RVER" };

/** A store of files, and a look into it from outside. */
export interface FilePlace {
  storage: Storage;
  /** What lies there. */
  listed(): Promise<string[]>;
  close(): Promise<void>;
}

/** The same settings as in front of a real store, answered by a local stand-in. */
export async function openBucket(): Promise<FilePlace> {
  const directory = await mkdtemp(join(tmpdir(), "tailmark-bucket-"));
  const server = new S3rver({ address: "127.0.0.1", port: 0, silent: true, directory, configureBuckets: [{ name: BUCKET }] });
  const { port } = await server.run();
  const endpoint = `http://127.0.0.1:${port}`;
  const client = new S3Client({ endpoint, region: "us-east-1", forcePathStyle: true, credentials: KEYS });
  return {
    storage: openStorage(
      readEnv({ S3_BUCKET: BUCKET, S3_ENDPOINT: endpoint, S3_ACCESS_KEY_ID: KEYS.accessKeyId, S3_SECRET_ACCESS_KEY: KEYS.secretAccessKey }),
    ),
    async listed() {
      const { Contents = [] } = await client.send(new ListObjectsV2Command({ Bucket: BUCKET }));
      return Contents.map((object) => String(object.Key)).sort();
    },
    async close() {
      client.destroy();
      await server.close();
      await rm(directory, { recursive: true, force: true });
    },
  };
}
