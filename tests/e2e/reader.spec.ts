import { expect, test } from "@tests/support/browser";

test("a reader reads and downloads the report that an engineer published, and nothing about vehicles", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/screen");
  await page.getByRole("button", { name: "Publish" }).click();
  await page.getByLabel("Title of the report").fill("Worst junctions of early March");
  await page.getByRole("button", { name: "Publish the report" }).click();
  await expect(page).toHaveURL(/\/hotspots\/[0-9a-f-]{36}/);

  await page.context().clearCookies();
  await signIn("reader");
  await page.goto("/");
  await expect(page).toHaveURL(/\/hotspots$/);
  await expectAccessible();
  await page.getByRole("link", { name: /Worst junctions of early March/ }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Worst junctions of early March" })).toBeVisible();
  await expect(page.getByText(/screening aid/).first()).toBeVisible();
  await expectAccessible();
  const href = await page.getByRole("link", { name: /CSV/ }).getAttribute("href");
  const csv = await (await page.request.get(href ?? "")).text();
  expect(csv.split("\n")[0]).toContain("mean_delay_s_per_veh");
  expect(csv).not.toMatch(/vehicle_id/);

  for (const path of ["/screen", "/junctions", "/junctions/1", "/legs/1", "/data"]) {
    await page.goto(path);
    await expect(page.getByText("Your role does not open this page.")).toBeVisible();
  }
  for (const path of ["/api/legs/1/tracks", "/api/legs/1", "/api/junctions/1", "/api/screen", "/api/uploads"]) {
    expect((await page.request.get(path)).status(), path).toBe(403);
  }
});
