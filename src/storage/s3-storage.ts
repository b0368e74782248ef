import { Readable } from "node:stream";
import type { S3Client, S3ClientConfig } from "@aws-sdk/client-s3";
import { notFound } from "@/domain/errors";
import { checkKey, type Storage } from "./storage";

export interface S3StorageOptions {
  bucket: string;
  region: string;
  /** Address of a store that is not Amazon's own; its buckets are then named in the path. */
  endpoint?: string;
  /** Where absent, the library looks for them as on any machine of that cloud: role, profile, environment. */
  credentials?: { accessKeyId: string; secretAccessKey: string };
}

/** Held in memory at once: two parts of the least size that the protocol allows. */
const PARTS_AT_ONCE = 2;

/** Keeps each object in a bucket of any store that speaks the S3 protocol. The library is loaded on first use. */
export function openS3Storage(options: S3StorageOptions): Storage {
  const Bucket = options.bucket;
  let opened: Promise<S3Client> | undefined;
  const client = () => (opened ??= import("@aws-sdk/client-s3").then((sdk) => new sdk.S3Client(configOf(options))));

  return {
    async put(key, content) {
      checkKey(key);
      const { Upload } = await import("@aws-sdk/lib-storage");
      let bytes = 0;
      let cut: unknown;
      async function* counted() {
        try {
          for await (const chunk of content as AsyncIterable<Uint8Array>) {
            bytes += chunk.length;
            yield chunk;
          }
        } catch (error) {
          cut = error;
          throw error;
        }
      }
      const Body = Readable.from(counted(), { objectMode: false });
      // A store shows an object when its last part is in, never earlier; parts of a failed one are taken back.
      const upload = new Upload({ client: await client(), params: { Bucket, Key: key, Body }, queueSize: PARTS_AT_ONCE, leavePartsOnError: false });
      try {
        await upload.done();
        return bytes;
      } catch (error) {
        // Taking the parts back may fail in its turn; what cut the transfer says more.
        throw cut ?? error;
      } finally {
        Body.destroy();
      }
    },

    async open(key, range) {
      checkKey(key);
      const { GetObjectCommand } = await import("@aws-sdk/client-s3");
      try {
        const { Body } = await (await client()).send(new GetObjectCommand({ Bucket, Key: key, ...(range && { Range: `bytes=${range.from}-${range.to - 1}` }) }));
        return Body as Readable;
      } catch (error) {
        if (isMissing(error)) throw notFound("Stored file", key);
        throw error;
      }
    },

    async size(key) {
      checkKey(key);
      const { HeadObjectCommand } = await import("@aws-sdk/client-s3");
      try {
        return (await (await client()).send(new HeadObjectCommand({ Bucket, Key: key }))).ContentLength ?? 0;
      } catch (error) {
        if (isMissing(error)) return null;
        throw error;
      }
    },

    async remove(key) {
      checkKey(key);
      const { DeleteObjectCommand } = await import("@aws-sdk/client-s3");
      await (await client()).send(new DeleteObjectCommand({ Bucket, Key: key }));
    },

    async removeFolder(folder) {
      const Prefix = `${checkKey(folder)}/`;
      const { DeleteObjectCommand, ListObjectsV2Command } = await import("@aws-sdk/client-s3");
      for (;;) {
        const { Contents = [] } = await (await client()).send(new ListObjectsV2Command({ Bucket, Prefix }));
        if (Contents.length === 0) return;
        // One by one: the request for many at once asks for a checksum that stores of other makers do not all know.
        for (const { Key } of Contents) await (await client()).send(new DeleteObjectCommand({ Bucket, Key }));
      }
    },
  };
}

function configOf({ region, endpoint, credentials }: S3StorageOptions): S3ClientConfig {
  return {
    region,
    credentials,
    ...(endpoint && { endpoint, forcePathStyle: true }),
    // Stores of other makers do not know the newer checksums; the transfer is checked by TLS and by length.
    requestChecksumCalculation: "WHEN_REQUIRED",
    responseChecksumValidation: "WHEN_REQUIRED",
  };
}

function isMissing(error: unknown): boolean {
  return error instanceof Error && (error.name === "NoSuchKey" || error.name === "NotFound");
}
