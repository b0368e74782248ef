import { expect, test } from "@tests/support/browser";

test("a technician opens a leg strip on a phone and is refused the upload", async ({ page, signIn, expectAccessible }) => {
  await signIn("technician");
  await page.goto("/");
  await expect(page).toHaveURL(/\/junctions$/);
  await page.getByRole("searchbox").fill("Quay Street");
  await page.getByRole("link", { name: /Quay Street/ }).first().click();
  await expect(page.getByRole("heading", { level: 1, name: /Quay Street/ })).toBeVisible();
  await expectAccessible();

  await page.locator('a[href^="/legs/"]').first().click();
  await expect(page.getByRole("heading", { level: 1, name: /^Leg from the/ })).toBeVisible();
  const canvas = page.locator("canvas").first();
  await expect(canvas).toBeVisible();
  const box = await canvas.boundingBox();
  expect(box?.width).toBeLessThanOrEqual(page.viewportSize()?.width ?? 0);
  expect(box?.height).toBeGreaterThan(150);
  expect(await page.evaluate(() => document.documentElement.scrollWidth <= window.innerWidth)).toBe(true);
  await expect(page.getByRole("link", { name: "Save cells as CSV" })).toHaveCount(0);
  await expectAccessible();

  await page.goto("/data");
  await expect(page.getByText("Your role does not open this page.")).toBeVisible();
  await expectAccessible();
  const refused = await page.request.post("/api/uploads?kind=pings&name=x.csv", { data: "vehicle_id,timestamp,lat,lon\n" });
  expect(refused.status()).toBe(403);
});

test("the screen is a list first on a phone", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/screen");
  await expect(page.getByRole("table", { name: "Junctions, ranked" })).toBeVisible();
  expect(await page.evaluate(() => document.documentElement.scrollWidth <= window.innerWidth)).toBe(true);
  await expectAccessible();
});
