import { PassThrough, Readable } from "node:stream";
import { REJECT_SENTENCES, type RejectedRow } from "@/domain/upload";
import { csvText, type Cell } from "@/formats/csv/write-csv";
import type { Context } from "../context";

const HEADER = ["line", "reason", "explanation", "row"];

export interface RejectWriter {
  add(row: RejectedRow): Promise<void>;
  /** The storage key, or null where no row was rejected. */
  finish(): Promise<string | null>;
  abandon(): Promise<void>;
}

/** Streams the rejected rows to storage as they come up: a file may hold millions. */
export function openRejects(ctx: Context, uploadId: string): RejectWriter {
  const key = `uploads/${uploadId}-rejected.csv`;
  let rows: PassThrough | null = null;
  let stored: Promise<number> | null = null;
  let failure: unknown;

  function start(): PassThrough {
    const stream = new PassThrough({ objectMode: true });
    stored = ctx.storage.put(key, Readable.from(csvText(HEADER, stream as AsyncIterable<Cell[]>)));
    // A full disk must reach the one who adds rows, not only the one who finishes.
    stored.catch((error: unknown) => {
      failure = error;
      stream.destroy();
    });
    return stream;
  }

  return {
    async add(row) {
      rows ??= start();
      const hasRoom = rows.write([row.line, row.reason, REJECT_SENTENCES[row.reason], row.text]);
      if (!hasRoom) await drained(rows);
      if (failure) throw failure;
    },
    async finish() {
      if (!rows) return null;
      rows.end();
      await stored;
      return key;
    },
    async abandon() {
      if (!rows) return;
      rows.end();
      await stored?.catch(() => undefined);
      await ctx.storage.remove(key);
    },
  };
}

/** Resolves as well when nobody will ever drain it. */
function drained(stream: PassThrough): Promise<void> {
  if (stream.destroyed) return Promise.resolve();
  return new Promise((resolve) => {
    const done = () => {
      stream.off("drain", done).off("close", done);
      resolve();
    };
    stream.on("drain", done).on("close", done);
  });
}

export async function storeRejects(ctx: Context, uploadId: string, rows: readonly RejectedRow[]): Promise<string | null> {
  const writer = openRejects(ctx, uploadId);
  for (const row of rows) await writer.add(row);
  return writer.finish();
}
