import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, test } from "@tests/support/browser";

const PIECE_BYTES = 8 * 2 ** 20;

test("a file whose line is cut is paused, goes on after a reload where it stopped, and is discarded", async ({ page, signIn, expectAccessible }) => {
  const folder = await mkdtemp(join(tmpdir(), "tailmark-pieces-"));
  try {
    const path = join(folder, "long-week.csv");
    await writeFile(path, `vehicle_id,timestamp,lat,lon\n${"v1,2026-03-02T08:00:00Z,41.2,-31.5\n".repeat(800_000)}`);
    await signIn("engineer");
    await page.goto("/data");
    let pieces = 0;
    await page.route("**/api/uploads/parts/*", async (route) => {
      const isPiece = route.request().method() === "PATCH";
      if (isPiece && ++pieces > 2) return route.abort("connectionfailed");
      return route.continue();
    });
    await page.getByLabel("File", { exact: true }).setInputFiles(path);
    await page.getByRole("button", { name: "Send the file" }).click();
    await expect.poll(() => pieces).toBeGreaterThan(2);
    await page.getByRole("button", { name: "Pause" }).click();
    await expect(page.getByText("Paused.")).toBeVisible();
    await expectAccessible();

    await page.unroute("**/api/uploads/parts/*");
    await page.reload();
    const offsets: number[] = [];
    const checksums: string[] = [];
    page.on("request", (request) => {
      if (request.method() !== "PATCH") return;
      offsets.push(Number(request.headers()["upload-offset"]));
      checksums.push(request.headers()["upload-checksum"] ?? "");
    });
    await page.getByLabel("File", { exact: true }).setInputFiles(path);
    await page.getByRole("button", { name: "Send the file" }).click();
    await expect(page).toHaveURL(/\/data\/[0-9a-f-]{36}$/, { timeout: 30_000 });
    expect(offsets[0]).toBe(2 * PIECE_BYTES);
    expect(checksums.every((checksum) => checksum.startsWith("sha256 "))).toBe(true);
    await expect(page.getByText("long-week.csv").first()).toBeVisible();

    await page.getByRole("button", { name: "Discard the file" }).click();
    await page.getByRole("button", { name: "Yes, discard" }).click();
    await expect(page).toHaveURL(/\/data$/);
    expect(await page.evaluate(() => Object.keys(localStorage).filter((key) => key.startsWith("tus::")))).toEqual([]);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
});

test("a file that is chosen before the page listens is sent", async ({ page, signIn }) => {
  await signIn("engineer");
  let release = () => {};
  const listens = new Promise<void>((resolve) => (release = resolve));
  await page.route("**/_next/static/**/*.js", async (route) => {
    await listens;
    await route.continue();
  });
  await page.goto("/data", { waitUntil: "commit" });
  await page.getByLabel("File", { exact: true }).setInputFiles({ name: "early.csv", mimeType: "text/csv", buffer: Buffer.from("vehicle_id,timestamp,lat,lon\nv1,2026-03-02T08:00:00Z,41.2,-31.5\n") });
  release();
  await expect(page.getByText("early.csv, 64 B")).toBeVisible();
  await page.getByRole("button", { name: "Send the file" }).click();
  await expect(page).toHaveURL(/\/data\/[0-9a-f-]{36}/);
  await page.getByRole("button", { name: "Discard the file" }).click();
  await page.getByRole("button", { name: "Yes, discard" }).click();
  await expect(page).toHaveURL(/\/data$/);
});
