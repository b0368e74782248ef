import type { Page } from "@playwright/test";
import { Client } from "pg";
import { expect, test } from "@tests/support/browser";

async function one<T>(text: string): Promise<T> {
  const client = new Client({ connectionString: process.env.DATABASE_URL });
  await client.connect();
  try {
    return (await client.query(text)).rows[0] as T;
  } finally {
    await client.end();
  }
}

const matched = (page: Page) => expect(page.getByText("all figures are up to date")).toBeVisible({ timeout: 60_000 });

/** A stop line 18 m from the junction and 90 m of street behind it, typed. */
async function drawAlong(page: Page, bearing: string): Promise<void> {
  for (const length of ["18", "90"]) {
    await page.getByLabel(/^Bearing/).fill(bearing);
    await page.getByLabel(/^Length/).fill(length);
    await page.getByRole("button", { name: "Add the point" }).press("Enter");
  }
}

test("an engineer renames a leg and moves its stop line, and the list shows it locked", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/data");
  await page.getByRole("link", { name: "Check the legs" }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Legs to check" })).toBeVisible();
  await expectAccessible();
  await page.getByRole("list", { name: /most doubtful first/ }).getByRole("link").first().click();
  await expect(page.getByRole("group", { name: /^Plan of the legs of/ })).toBeVisible();
  await expectAccessible();

  await page.getByRole("slider", { name: /^Stop line/ }).focus();
  for (let i = 0; i < 4; i++) await page.keyboard.press("ArrowUp");
  await expect(page.getByLabel(/^Move the stop line/)).toHaveValue("4");
  await page.getByLabel("Name").fill("Sluice Road, checked");
  await page.getByRole("button", { name: "Save the leg" }).click();
  await expect(page.getByText(/^The leg is saved/)).toBeVisible();
  await matched(page);
  await expect(page.getByText("set by an engineer").first()).toBeVisible();
  await expectAccessible();

  await page.goto("/data/legs?show=locked");
  const row = page.getByRole("link", { name: /Sluice Road, checked/ });
  await expect(row).toContainText("locked");
  await page.getByRole("searchbox").fill("no such street");
  await expect(page.getByText("There is no locked leg")).toBeVisible();
});

test("an engineer adds a leg by keyboard alone, splits it and merges both away", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  const { id } = await one<{ id: number }>("select junction_id as id from legs group by junction_id having count(*) >= 3 order by junction_id desc limit 1");
  await page.goto(`/data/legs/${id}`);
  const legs = page.getByRole("group", { name: "Legs" }).getByRole("radio");
  await expect(legs.first()).toBeVisible();
  const before = await legs.count();
  await page.getByRole("button", { name: "Add a leg" }).press("Enter");
  await page.getByLabel("Name").fill("Yard gate");
  await drawAlong(page, "30");
  await expect(page.getByText("2 points drawn")).toBeVisible();
  await expectAccessible();
  await page.getByRole("button", { name: "Add the leg" }).press("Enter");
  await expect(page.getByRole("heading", { name: "Leg Yard gate" })).toBeVisible();
  await expect(legs).toHaveCount(before + 1);
  await matched(page);

  await page.getByText("Merge or split").click();
  await page.getByRole("button", { name: "Split the leg" }).press("Enter");
  await drawAlong(page, "30");
  await page.getByRole("radio", { name: /the second line/ }).check();
  await drawAlong(page, "75");
  await page.getByRole("button", { name: "Split the leg" }).press("Enter");
  await expect(legs).toHaveCount(before + 2);

  await legs.first().check();
  await page.getByText("Merge or split").click();
  // Vehicles on a line that lies at 75 degrees travel at 255 degrees.
  for (const [i, label] of ["from the east, westbound (255°)", "Yard gate"].entries()) {
    await page.getByLabel("The same street as").selectOption({ label });
    await page.getByRole("button", { name: "Merge the legs" }).click();
    await expect(legs).toHaveCount(before + 1 - i);
  }
  await matched(page);
});

test("a file of drawn leg lines is taken, and the pings are matched to them", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  const junction = await one<{ id: number; code: string; lat: number; lon: number }>(
    "select j.id, j.code, j.lat, j.lon from junctions j where not exists (select 1 from legs where junction_id = j.id and locked) and exists (select 1 from legs where junction_id = j.id) order by j.id limit 1",
  );
  const west = (metres: number) => [junction.lon - metres / 78_000, junction.lat];
  const feature = (code: string) => ({ type: "Feature", properties: { junction_id: code, name: "Drawn from the west", lanes: 2 }, geometry: { type: "LineString", coordinates: [west(250), west(18)] } });
  const file = JSON.stringify({ type: "FeatureCollection", features: [feature(junction.code), feature("NOWHERE")] });

  await page.goto("/data");
  await page.getByRole("radio", { name: /Leg lines drawn by the city/ }).check();
  await page.locator('input[type="file"]').setInputFiles({ name: "legs.geojson", mimeType: "application/geo+json", buffer: Buffer.from(file) });
  await page.getByRole("button", { name: "Send the file" }).click();
  await expect(page).toHaveURL(/\/data\/[0-9a-f-]{36}/);
  await expect(page.getByText("Lines of GeoJSON")).toBeVisible();
  await expectAccessible();
  await page.getByRole("button", { name: "Read the file" }).click();
  await expect(page.getByText("1 leg at 1 junction is drawn now")).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText("No junction with this identifier is loaded.").first()).toBeVisible();
  await expectAccessible();

  await page.goto(`/data/legs/${junction.id}`);
  await expect(page.getByRole("heading", { name: "Leg Drawn from the west" })).toBeVisible();
  await expect(page.getByText("drawn in a file").first()).toBeVisible();
});

test("an administrator looks and changes nothing", async ({ page, signIn, expectAccessible }) => {
  await signIn("admin");
  const { id } = await one<{ id: number }>("select junction_id as id from legs order by id limit 1");
  await page.goto(`/data/legs/${id}`);
  await expect(page.getByText("An engineer can change the leg.")).toBeVisible();
  await expect(page.getByRole("button", { name: /Save|Add a leg|Split/ })).toHaveCount(0);
  await expectAccessible();
});
