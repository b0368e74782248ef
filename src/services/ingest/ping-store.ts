import { mkdtemp, open, rm, type FileHandle } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { PingColumns } from "@/core/types";
import { appendColumns, emptyColumns } from "@/formats/pings/ping-columns";

/** Pings of a file on their way to the core: in memory while they are few, else on disk in buckets of whole vehicles. */
export interface PingStore {
  add(batch: PingColumns): Promise<void>;
  readonly length: number;
  /** After the last `add`. Each bucket holds all pings of its vehicles. */
  buckets(): AsyncGenerator<PingColumns>;
  close(): Promise<void>;
}

const BYTES_PER_PING = 36;
const BUCKETS = 48;
const BUFFER_PINGS = 4096;

export interface PingStoreOptions {
  /** Pings held in memory before the store turns to the disk. */
  memoryPings: number;
}

/** 5 million pings are 180 MB of columns: several such stores fit into a worker's gigabyte. */
const DEFAULTS: PingStoreOptions = { memoryPings: 5_000_000 };

export function openPingStore(options: PingStoreOptions = DEFAULTS): PingStore {
  let columns = emptyColumns(1 << 16);
  let spill: Spill | null = null;
  let length = 0;

  return {
    get length() {
      return length;
    },
    async add(batch) {
      length += batch.length;
      if (spill) return spill.add(batch);
      columns = appendColumns(columns, batch);
      if (columns.length <= options.memoryPings) return;
      spill = await openSpill();
      await spill.add(columns);
      columns = emptyColumns(0);
    },
    async *buckets() {
      if (!spill) {
        if (columns.length > 0) yield columns;
        return;
      }
      for (let i = 0; i < BUCKETS; i++) {
        const bucket = await spill.read(i);
        if (bucket.length > 0) yield bucket;
      }
    },
    async close() {
      columns = emptyColumns(0);
      await spill?.close();
    },
  };
}

/** One batch out of several. */
export function joinPings(parts: readonly PingColumns[]): PingColumns {
  return parts.length === 1 ? parts[0] : parts.reduce(appendColumns, emptyColumns(parts.reduce((sum, part) => sum + part.length, 0)));
}

interface Spill {
  add(batch: PingColumns): Promise<void>;
  read(bucket: number): Promise<PingColumns>;
  close(): Promise<void>;
}

interface BucketFile {
  file: FileHandle;
  pings: number;
  view: DataView;
  filled: number;
}

async function openSpill(): Promise<Spill> {
  const folder = await mkdtemp(join(tmpdir(), "tailmark-pings-"));
  const files: BucketFile[] = [];
  for (let i = 0; i < BUCKETS; i++) {
    const file = await open(join(folder, `${i}.pings`), "w+");
    files.push({ file, pings: 0, view: new DataView(new ArrayBuffer(BUFFER_PINGS * BYTES_PER_PING)), filled: 0 });
  }
  // Without names the files go with the process, however it ends.
  await rm(folder, { recursive: true, force: true });
  return {
    async add(batch) {
      for (let i = 0; i < batch.length; i++) {
        const bucket = files[batch.vehicle[i] % BUCKETS];
        writePing(bucket.view, bucket.filled++ * BYTES_PER_PING, batch, i);
        if (bucket.filled === BUFFER_PINGS) await flush(bucket);
      }
    },
    async read(index) {
      await flush(files[index]);
      const bytes = new Uint8Array(files[index].pings * BYTES_PER_PING);
      await fill(bytes, files[index].file);
      return readPings(new DataView(bytes.buffer));
    },
    async close() {
      for (const { file } of files) await file.close();
    },
  };
}

async function flush(bucket: BucketFile): Promise<void> {
  if (bucket.filled === 0) return;
  const bytes = new Uint8Array(bucket.view.buffer, 0, bucket.filled * BYTES_PER_PING);
  const end = bucket.pings * BYTES_PER_PING;
  for (let done = 0; done < bytes.length; ) done += (await bucket.file.write(bytes, done, bytes.length - done, end + done)).bytesWritten;
  bucket.pings += bucket.filled;
  bucket.filled = 0;
}

/** The file from its beginning; one read stops at 2 GiB, and may stop earlier. */
async function fill(bytes: Uint8Array, file: FileHandle): Promise<void> {
  for (let at = 0; at < bytes.length; ) {
    const { bytesRead } = await file.read(bytes, at, Math.min(bytes.length - at, 2 ** 30), at);
    if (bytesRead === 0) throw new Error("A file of pings on the disk ends too early.");
    at += bytesRead;
  }
}

function writePing(view: DataView, at: number, batch: PingColumns, i: number): void {
  view.setUint32(at, batch.vehicle[i], true);
  view.setFloat64(at + 4, batch.tMs[i], true);
  view.setFloat64(at + 12, batch.lat[i], true);
  view.setFloat64(at + 20, batch.lon[i], true);
  view.setFloat32(at + 28, batch.speedMs[i], true);
  view.setFloat32(at + 32, batch.headingDeg[i], true);
}

function readPings(view: DataView): PingColumns {
  const columns = emptyColumns(view.byteLength / BYTES_PER_PING);
  columns.length = columns.vehicle.length;
  for (let i = 0; i < columns.length; i++) {
    const at = i * BYTES_PER_PING;
    columns.vehicle[i] = view.getUint32(at, true);
    columns.tMs[i] = view.getFloat64(at + 4, true);
    columns.lat[i] = view.getFloat64(at + 12, true);
    columns.lon[i] = view.getFloat64(at + 20, true);
    columns.speedMs[i] = view.getFloat32(at + 28, true);
    columns.headingDeg[i] = view.getFloat32(at + 32, true);
  }
  return columns;
}
