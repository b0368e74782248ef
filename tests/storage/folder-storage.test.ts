import { mkdtemp, readdir, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { openFolderStorage } from "@/storage/folder-storage";
import type { Storage } from "@/storage/storage";

let root: string;
let storage: Storage;

beforeEach(async () => {
  root = await mkdtemp(join(tmpdir(), "tailmark-storage-"));
  storage = openFolderStorage(root);
});

afterEach(() => rm(root, { recursive: true, force: true }));

describe("folder storage", () => {
  it("gives back the bytes it was given", async () => {
    const bytes = Buffer.from(Array.from({ length: 300_000 }, (_, i) => i % 251));
    expect(await storage.put("uploads/a1.csv", Readable.from([bytes.subarray(0, 1000), bytes.subarray(1000)]))).toBe(300_000);
    expect(await storage.size("uploads/a1.csv")).toBe(300_000);
    expect((await buffer(await storage.open("uploads/a1.csv"))).equals(bytes)).toBe(true);
  });

  it("takes the chunks of an async generator, and none at all", async () => {
    async function* chunks() {
      yield new TextEncoder().encode("ab");
      yield new TextEncoder().encode("cd");
    }
    expect(await storage.put("x", chunks())).toBe(4);
    expect(String(await buffer(await storage.open("x")))).toBe("abcd");
    expect(await storage.put("empty", Readable.from([]))).toBe(0);
    expect(await storage.size("empty")).toBe(0);
  });

  it("shows nothing of an object that did not arrive whole, and keeps the older one", async () => {
    async function* broken() {
      yield new TextEncoder().encode("half");
      throw new Error("the line went dead");
    }
    await storage.put("kept", Readable.from([Buffer.from("old")]));
    await expect(storage.put("kept", broken())).rejects.toThrow("the line went dead");
    await expect(storage.put("new", broken())).rejects.toThrow("the line went dead");
    expect(String(await buffer(await storage.open("kept")))).toBe("old");
    expect(await readdir(root)).toEqual(["kept"]);
  });

  it("says what is missing", async () => {
    await expect(storage.open("nothing/here")).rejects.toThrow("Stored file nothing/here does not exist.");
    expect(await storage.size("nothing/here")).toBeNull();
    await storage.remove("nothing/here");
  });

  it.each(["../secrets.json", "/etc/passwd", "a/../../b", "a//b", "", ".hidden", "a/./b", "a\u0000b"])("refuses the key %j", async (key) => {
    await expect(storage.open(key)).rejects.toThrow(RangeError);
    await expect(storage.put(key, Readable.from([]))).rejects.toThrow(RangeError);
  });
});
