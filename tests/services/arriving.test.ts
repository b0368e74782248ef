import { createHash } from "node:crypto";
import { mkdtemp, readdir, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { text } from "node:stream/consumers";
import { FileStore } from "@tus/file-store";
import { ERRORS } from "@tus/server";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { answerArriving, openArrived, removeArrived } from "@/server/arriving";
import { testContext, type TestContext } from "@tests/support/database";
import { expectLoggedErrors } from "@tests/support/setup";

let folder: string;
let engineer: TestContext;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "tailmark-arriving-"));
  vi.stubEnv("DATA_DIR", folder);
  vi.stubEnv("BASE_URL", "http://city.example");
  engineer = await testContext("engineer");
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await rm(folder, { recursive: true, force: true });
});

const CONTENT = Buffer.from("vehicle_id,timestamp,lat,lon\nv1,2026-03-02T08:00:00Z,45.6,-38.3\n");
const BASE = "http://city.example/api/uploads/parts";
const sha256 = (bytes: Uint8Array) => `sha256 ${createHash("sha256").update(bytes).digest("base64")}`;

async function ask(method: string, partId: string | null, headers: Record<string, string>, body?: Uint8Array, ctx = engineer): Promise<Response> {
  const request = new Request(partId ? `${BASE}/${partId}` : BASE, { method, headers: { "tus-resumable": "1.0.0", ...headers }, body: body && Buffer.from(body) });
  return answerArriving(ctx, request, partId);
}

async function begin(length = CONTENT.length): Promise<string> {
  const answer = await ask("POST", null, { "upload-length": String(length), "upload-metadata": `filename ${btoa("pings.csv")}` });
  expect(answer.status).toBe(201);
  return String(answer.headers.get("location")).split("/").at(-1) ?? "";
}

async function send(partId: string, offset: number, piece: Uint8Array, more: Record<string, string> = {}, ctx = engineer): Promise<Response> {
  return ask("PATCH", partId, { "upload-offset": String(offset), "content-type": "application/offset+octet-stream", ...more }, piece, ctx);
}

const offsetOf = async (partId: string) => (await ask("HEAD", partId, {})).headers.get("upload-offset");

describe("a file that arrives in pieces", () => {
  it("goes on where it stopped, and is whole at the end", async () => {
    const partId = await begin();
    expect(await offsetOf(partId)).toBe("0");
    expect((await send(partId, 0, CONTENT.subarray(0, 20))).status).toBe(204);
    expect(await offsetOf(partId)).toBe("20");
    await expect(openArrived(engineer, partId)).rejects.toMatchObject({ code: "conflict" });
    expect((await send(partId, 20, CONTENT.subarray(20), { "upload-checksum": sha256(CONTENT.subarray(20)) })).status).toBe(204);
    expect(await text(await openArrived(engineer, partId))).toBe(CONTENT.toString());
    await removeArrived(partId);
    expect(await readdir(join(folder, "arriving"))).toEqual([]);
  });

  it("takes no piece that is damaged or stands in the wrong place", async () => {
    const partId = await begin();
    expect((await send(partId, 0, CONTENT.subarray(0, 20), { "upload-checksum": sha256(CONTENT) })).status).toBe(460);
    expect((await send(partId, 5, CONTENT.subarray(0, 20))).status).toBe(409);
    expect(await offsetOf(partId)).toBe("0");
    await expect(send(partId, 0, CONTENT, { "upload-checksum": "crc32 AAAA" })).rejects.toMatchObject({ code: "invalid" });
  });

  it("is nobody's but its sender's", async () => {
    const partId = await begin();
    const other = await testContext("engineer");
    await expect(send(partId, 0, CONTENT, {}, other)).rejects.toMatchObject({ code: "not_found" });
    await expect(openArrived(other, partId)).rejects.toMatchObject({ code: "not_found" });
    for (const role of ["technician", "reader", "admin"] as const) {
      const ctx = await testContext(role);
      await expect(send(partId, 0, CONTENT, {}, ctx)).rejects.toMatchObject({ code: "forbidden" });
    }
    await expect(send(partId, 0, CONTENT, {}, await testContext("nobody"))).rejects.toMatchObject({ code: "unauthenticated" });
    expect(await offsetOf(partId)).toBe("0");
  });

  it("says so when it cannot be written, and keeps what has arrived", async () => {
    const partId = await begin();
    await send(partId, 0, CONTENT.subarray(0, 20));
    const log = expectLoggedErrors();
    const write = vi.spyOn(FileStore.prototype, "write").mockRejectedValueOnce(ERRORS.FILE_WRITE_ERROR);
    const answer = await send(partId, 20, CONTENT.subarray(20));
    write.mockRestore();
    expect(answer.status).toBe(507);
    expect(await answer.json()).toMatchObject({ code: "full", message: expect.stringContaining("there may be no room left") });
    expect(log).toHaveLength(1);
    expect(await offsetOf(partId)).toBe("20");
  });

  it("leaves nothing when it is given up", async () => {
    const partId = await begin();
    await send(partId, 0, CONTENT.subarray(0, 20));
    expect((await ask("DELETE", partId, {})).status).toBe(204);
    expect((await readdir(join(folder, "arriving"))).filter((name) => name.startsWith(partId))).toEqual([]);
  });

  it.each(["../../etc/passwd", "0".repeat(32), "x"])("is not found by the name %j", async (partId) => {
    await expect(openArrived(engineer, partId)).rejects.toMatchObject({ code: "not_found" });
  });
});
