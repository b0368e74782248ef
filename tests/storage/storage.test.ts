import { mkdtemp, readdir, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { readEnv } from "@/env";
import { openStorage, sweepStorage } from "@/storage/open-storage";
import type { Storage } from "@/storage/storage";
import { openBucket, type FilePlace } from "@tests/support/bucket";

async function folderPlace(): Promise<FilePlace> {
  const dataDir = await mkdtemp(join(tmpdir(), "tailmark-storage-"));
  const list = async () => (await readdir(join(dataDir, "storage"), { recursive: true, withFileTypes: true })).filter((entry) => entry.isFile());
  return {
    storage: openStorage(readEnv({ DATA_DIR: dataDir })),
    listed: async () => (await list()).map((entry) => entry.name).sort(),
    close: () => rm(dataDir, { recursive: true, force: true }),
  };
}

describe("halves of files in a folder", () => {
  it("go after a day, when nobody can be sending them any more", async () => {
    const dataDir = await mkdtemp(join(tmpdir(), "tailmark-storage-"));
    try {
      const settings = readEnv({ DATA_DIR: dataDir });
      await sweepStorage(settings, new Date());
      await openStorage(settings).put("uploads/whole", Readable.from([Buffer.from("all of it")]));
      await writeFile(join(dataDir, "storage/uploads/cut.1f.part"), "half");
      const list = () => readdir(join(dataDir, "storage/uploads"));
      await sweepStorage(settings, new Date(Date.now() + 23 * 3_600_000));
      expect((await list()).sort()).toEqual(["cut.1f.part", "whole"]);
      await sweepStorage(settings, new Date(Date.now() + 25 * 3_600_000));
      expect(await list()).toEqual(["whole"]);
      await openStorage(settings).put("pieces/run/0", Readable.from([Buffer.from("given up")]));
      const runs = () => readdir(join(dataDir, "storage/pieces"));
      await sweepStorage(settings, new Date(Date.now() + 23 * 3_600_000));
      expect(await runs()).toEqual(["run"]);
      await sweepStorage(settings, new Date(Date.now() + 25 * 3_600_000));
      expect(await runs()).toEqual([]);
    } finally {
      await rm(dataDir, { recursive: true, force: true });
    }
  });
});

const PLACES = { "a folder": folderPlace, "a bucket": openBucket };

describe.each(Object.entries(PLACES))("files in %s", (_, openPlace) => {
  let place: FilePlace;
  let storage: Storage;

  beforeAll(async () => {
    place = await openPlace();
    storage = place.storage;
  });

  afterAll(() => place.close());

  it("come back as the bytes that were given", async () => {
    const bytes = Buffer.from(Array.from({ length: 300_000 }, (_, i) => i % 251));
    expect(await storage.put("uploads/a1.csv", Readable.from([bytes.subarray(0, 1000), bytes.subarray(1000)]))).toBe(300_000);
    expect(await storage.size("uploads/a1.csv")).toBe(300_000);
    expect((await buffer(await storage.open("uploads/a1.csv"))).equals(bytes)).toBe(true);
    expect([...(await buffer(await storage.open("uploads/a1.csv", { from: 249, to: 253 })))]).toEqual([249, 250, 0, 1]);
  });

  it("go by the folder, and only those below it", async () => {
    for (const key of ["pieces/a/1", "pieces/a/b/2", "pieces/ab/3"]) await storage.put(key, Readable.from([Buffer.from(key)]));
    await storage.removeFolder("pieces/a");
    await storage.removeFolder("pieces/never");
    expect(await Promise.all(["pieces/a/1", "pieces/a/b/2", "pieces/ab/3"].map((key) => storage.size(key)))).toEqual([null, null, 11]);
    await storage.removeFolder("pieces");
  });

  it("may be larger than one part of a transfer", async () => {
    const chunk = Buffer.from(Array.from({ length: 2 ** 20 }, (_, i) => (i * 31 + (i >> 8)) % 253));
    async function* chunks() {
      for (let i = 0; i < 12; i++) yield chunk.subarray(i);
    }
    const length = 12 * 2 ** 20 - 66;
    expect(await storage.put("large", chunks())).toBe(length);
    expect(await storage.size("large")).toBe(length);
    const stored = await buffer(await storage.open("large"));
    expect(stored.subarray(2 ** 20, 2 ** 20 + 1000).equals(chunk.subarray(1, 1001))).toBe(true);
    expect(stored.subarray(-1000).equals(chunk.subarray(-1000))).toBe(true);
  });

  it("may come from an async generator, or be empty", async () => {
    async function* chunks() {
      yield new TextEncoder().encode("ab");
      yield new TextEncoder().encode("cd");
    }
    expect(await storage.put("x", chunks())).toBe(4);
    expect(String(await buffer(await storage.open("x")))).toBe("abcd");
    expect(await storage.put("empty", Readable.from([]))).toBe(0);
    expect(await storage.size("empty")).toBe(0);
    expect((await buffer(await storage.open("empty"))).length).toBe(0);
  });

  it.each([10, 11 * 2 ** 20])("are not seen when they did not arrive whole, cut after %i bytes; the older one stays", async (cutAfter) => {
    async function* broken() {
      for (let sent = 0; sent < cutAfter; sent += 2 ** 20) yield new Uint8Array(Math.min(2 ** 20, cutAfter)).fill(97);
      throw new Error("the line went dead");
    }
    await storage.put("kept", Readable.from([Buffer.from("old")]));
    const before = await place.listed();
    await expect(storage.put("kept", broken())).rejects.toThrow("the line went dead");
    await expect(storage.put("new", broken())).rejects.toThrow("the line went dead");
    expect(String(await buffer(await storage.open("kept")))).toBe("old");
    expect(await storage.size("new")).toBeNull();
    expect(await place.listed()).toEqual(before);
  });

  it("that are missing are named", async () => {
    await expect(storage.open("nothing/here")).rejects.toThrow("Stored file nothing/here does not exist.");
    expect(await storage.size("nothing/here")).toBeNull();
    await storage.remove("nothing/here");
  });

  it("are gone when they are removed, and may be left in the middle of a reading", async () => {
    await storage.put("short-lived", Readable.from([Buffer.alloc(2 ** 20, 98)]));
    const stream = await storage.open("short-lived");
    for await (const chunk of stream) {
      expect((chunk as Buffer)[0]).toBe(98);
      break;
    }
    await storage.remove("short-lived");
    expect(await storage.size("short-lived")).toBeNull();
  });

  it.each(["../secrets.json", "/etc/passwd", "a/../../b", "a//b", "", ".hidden", "a/./b", "a\u0000b"])("never lie under the key %j", async (key) => {
    await expect(storage.open(key)).rejects.toThrow(RangeError);
    await expect(storage.size(key)).rejects.toThrow(RangeError);
    await expect(storage.put(key, Readable.from([]))).rejects.toThrow(RangeError);
    await expect(storage.remove(key)).rejects.toThrow(RangeError);
  });
});
