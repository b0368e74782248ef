import { readdirSync } from "node:fs";
import { request as httpRequest } from "node:http";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { expect, test } from "@tests/support/browser";

/** Far out at sea: what is read in while other tests look at the city must not touch its figures. */
const AT_SEA = { lat: 41.2, lon: -31.5 };

const BATCH = Array.from({ length: 40 }, (_, i) =>
  JSON.stringify({ vehicle_id: "bus-7", timestamp: Date.parse("2026-03-03T08:00:00Z") + i * 5000, lat: AT_SEA.lat, lon: AT_SEA.lon + i * 0.0005, speed_kmh: 28, heading: 90 }),
).join("\n");

test("an engineer gives a supplier a token, its machine sends pings, and the token is revoked", async ({ page, signIn, request, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/data");
  await page.getByLabel("Supplier of the feed").fill("Harbour Buses");
  await page.getByRole("button", { name: "Make a token" }).click();
  const token = (await page.locator("code").innerText()).trim();
  expect(token).toMatch(/^[\w-]{43}$/);
  const row = page.getByRole("list", { name: "Tokens of feeds" }).getByRole("listitem").filter({ hasText: "Harbour Buses" });
  await expect(row).toContainText("never used");
  await expectAccessible();

  const send = (data: Buffer) => request.post("/api/v1/pings", { headers: { authorization: `Bearer ${token}`, "content-type": "application/x-ndjson" }, data });
  const first = await send(gzipSync(BATCH));
  expect(first.status()).toBe(202);
  expect(await first.json()).toMatchObject({ accepted: 40, rejected: 0, repeated: false });
  const again = await send(Buffer.from(BATCH));
  expect([again.status(), (await again.json()).repeated]).toEqual([200, true]);
  // Larger than what a request may be that passes through the proxy.
  const large = Array.from({ length: 130_000 }, (_, i) => `{"vehicle_id":"bus-${i % 90}","timestamp":${1772524800000 + i},"lat":${AT_SEA.lat},"lon":${AT_SEA.lon},"speed_kmh":28,"heading":90}`);
  expect(await (await send(Buffer.from(large.join("\n")))).json()).toMatchObject({ accepted: 130_000 });

  await page.reload();
  await expect(row).toContainText("last used");
  await expect(page.getByRole("table", { name: "Files sent, newest first" })).toContainText("Harbour Buses");
  await row.getByRole("button", { name: "Revoke" }).click();
  await row.getByRole("button", { name: "Yes, revoke" }).click();
  await expect(row).toContainText("revoked");
  expect((await send(Buffer.from("{}"))).status()).toBe(401);
});

test("the interface of the feed is described for everyone", async ({ request }) => {
  const document = await (await request.get("/api/v1/openapi.json")).json();
  expect(document.openapi).toBe("3.1.0");
  expect(Object.keys(document.paths)).toEqual(["/api/v1/pings"]);
});

test("a file whose connection is cut in the middle leaves nothing behind", async ({ page, signIn, context }) => {
  await signIn("engineer");
  const cookie = (await context.cookies()).map(({ name, value }) => `${name}=${value}`).join("; ");
  const list = async () => ((await (await page.request.get("/api/uploads")).json()) as { id: string }[]).map((upload) => upload.id);
  const stored = () => readdirSync(join(process.env.DATA_DIR ?? "", "storage/uploads")).sort();
  const before = { list: await list(), stored: stored() };
  const url = new URL("/api/uploads?kind=pings&name=cut.csv", process.env.E2E_URL);
  const upload = httpRequest(url, { method: "POST", headers: { cookie, "content-length": 50_000_000 } });
  upload.on("error", () => undefined);
  upload.write(`vehicle_id,timestamp,lat,lon\n${"v1,2026-03-03T08:00:00Z,45.6,-38.3\n".repeat(50_000)}`);
  // The server has begun to write.
  await expect.poll(() => stored().some((name) => name.endsWith(".part"))).toBe(true);
  const closed = new Promise((resolve) => upload.once("close", resolve));
  upload.destroy();
  await closed;
  await expect.poll(stored).toEqual(before.stored);
  expect(await list()).toEqual(before.list);
});
