import { readFile } from "node:fs/promises";
import { expect, test } from "@tests/support/browser";
import { laterFile, seededFile } from "@tests/support/city-files";

test("an engineer screens the PM peak, opens the worst junction and its strip, and exports the list", async ({ page, expectAccessible }) => {
  await page.goto("/");
  await page.getByLabel("E-mail address").fill("engineer@varnmouth.example");
  await page.getByLabel("Password").fill("varnmouth-engineer");
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page).toHaveURL(/\/screen$/);

  await page.getByRole("button", { name: /^Hours:/ }).click();
  await page.getByRole("radio", { name: /AM peak/ }).check();
  await expect(page).toHaveURL(/period=am/);
  await page.keyboard.press("Escape");
  await page.getByRole("button", { name: /^Hours: AM peak/ }).click();
  await page.getByRole("radio", { name: /PM peak/ }).check();
  await page.keyboard.press("Escape");
  await expect(page.getByRole("button", { name: /^Hours: PM peak/ })).toBeVisible();

  const table = page.getByRole("table", { name: "Junctions, ranked" });
  await table.getByRole("button", { name: /^delay/ }).click();
  await expect(page).toHaveURL(/sort=delay/);
  await expect(table.getByRole("columnheader", { name: /^delay/ })).toHaveAttribute("aria-sort", "descending");
  await expect.poll(async () => isFalling(await delaysOf(table.getByRole("row")))).toBe(true);
  await expectAccessible();

  await table.getByRole("row").nth(1).getByRole("button").click();
  await expect(page).toHaveURL(/at=\d+/);
  await expect(page.getByTestId("explanation")).toContainText(/vehicles seen/);

  const [download] = await Promise.all([page.waitForEvent("download"), page.getByRole("link", { name: "Export CSV" }).click()]);
  const csv = await readFile(await download.path(), "utf8");
  const [header, first] = csv.split("\n");
  expect(header).toContain("mean_delay_s_per_veh");
  const worst = (await table.getByRole("row").nth(1).getByRole("button").textContent()) ?? "";
  expect(first).toContain(worst);

  await page.getByRole("link", { name: `Open ${worst}` }).click();
  await expect(page.getByRole("heading", { level: 1, name: worst })).toBeVisible();
  await expect(page.getByRole("table").first()).toBeVisible();
  await expectAccessible();

  await page.goBack();
  await page.getByRole("link", { name: /^Strip of the leg/ }).click();
  await expect(page.getByRole("heading", { level: 1, name: /^Leg from the/ })).toBeVisible();
  await expect(page.locator("canvas").first()).toBeVisible();
  await expectAccessible();
  const [cells] = await Promise.all([page.waitForEvent("download"), page.getByRole("link", { name: "Save cells as CSV" }).click()]);
  expect((await readFile(await cells.path(), "utf8")).split("\n")[0]).toContain("space_mean_speed_kmh");
  const [picture] = await Promise.all([page.waitForEvent("download"), page.getByRole("button", { name: "Save picture" }).click()]);
  const png = await readFile(await picture.path());
  expect([...png.subarray(0, 4)]).toEqual([0x89, 0x50, 0x4e, 0x47]);
});

async function delaysOf(rows: import("@playwright/test").Locator): Promise<number[]> {
  const texts = await rows.evaluateAll((list) => list.map((row) => row.querySelectorAll('[role="cell"], td')[4]?.textContent ?? ""));
  return texts.map(Number.parseFloat).filter(Number.isFinite);
}

const isFalling = (values: number[]) => values.length > 5 && values.every((value, i) => i === 0 || values[i - 1] >= value);

test("an engineer reads in a supplier's next file and sees what became of it", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  const csv = laterFile(await seededFile("pings-2026-03-04.csv.gz"), 250, 7);
  await page.goto("/data");
  await expectAccessible();
  await page.locator('input[type="file"]').setInputFiles({ name: "next-week.csv", mimeType: "text/csv", buffer: Buffer.from(csv) });
  await page.getByRole("button", { name: "Send the file" }).click();
  await expect(page).toHaveURL(/\/data\/[0-9a-f-]{36}/);
  await page.getByLabel("Supplier").fill("Coast Cabs");
  await expectAccessible();
  await page.getByRole("button", { name: "Read the file" }).click();

  await expect(page.getByRole("heading", { name: "In words" })).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(`${(csv.split("\n").length - 2).toLocaleString("en-GB")} rows were read`)).toBeVisible();
  await expect(page.getByText(/traversals of \d+ of the city's/)).toBeVisible();
  await expectAccessible();

  await page.goto("/screen?since=2026-03-11&until=2026-03-11");
  await expect(page.getByRole("button", { name: /11 March 2026/ })).toBeVisible();
});

test("broken files are answered by a sentence each, and lose nothing", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/data");
  const noise = Buffer.from(Array.from({ length: 4096 }, (_, i) => (i * 7919 + (i >> 3) * 31) % 256));
  await page.locator('input[type="file"]').setInputFiles({ name: "noise.csv", mimeType: "text/csv", buffer: noise });
  await page.getByRole("button", { name: "Send the file" }).click();
  await expect(page.getByRole("main").getByRole("alert")).toContainText(/noise\.csv|not|cannot/i);

  const bad = "vehicle_id,timestamp,lat,lon\nv1,yesterday,45.6,-38.3\nv2,2026-03-04T08:00:00Z,95,-38.3\n";
  await page.locator('input[type="file"]').setInputFiles({ name: "bad-rows.csv", mimeType: "text/csv", buffer: Buffer.from(bad) });
  await page.getByRole("button", { name: "Send the file" }).click();
  await expect(page).toHaveURL(/\/data\/[0-9a-f-]{36}/);
  await page.getByRole("button", { name: "Read the file" }).click();
  await expect(page.getByText("No row of the file could be read as a ping")).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText("The time cannot be read.").first()).toBeVisible();
  await expectAccessible();
});

test("the pages that are left open without a fault that axe finds", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  for (const path of ["/junctions", "/hotspots", "/methods", "/no-such-page"]) {
    await page.goto(path);
    await expect(page.getByRole("heading", { level: 1 })).toBeVisible();
    await expectAccessible();
  }
});
