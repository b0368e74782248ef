import { readdirSync, readFileSync } from "node:fs";
import { gzipSync } from "node:zlib";
import { expect, test } from "@tests/support/browser";

const MOST_BYTES = 250_000;
const CHUNKS = new URL("../../.next/static/chunks/", import.meta.url);

/** Chunks of the build that carry the map library, told by the class names that it gives its elements. */
function mapChunks(): string[] {
  return readdirSync(CHUNKS).filter((name) => name.endsWith(".js") && readFileSync(new URL(name, CHUNKS), "utf8").includes("maplibregl-canvas-container"));
}

test("the Screen page comes with at most 250 kB of compressed scripts, the map library aside", async ({ page, signIn }) => {
  await signIn("engineer");
  const scripts = new Set<string>();
  page.on("response", (response) => response.request().resourceType() === "script" && scripts.add(new URL(response.url()).pathname));
  await page.goto("/screen");
  await expect(page.locator("canvas.maplibregl-canvas")).toBeVisible();
  await page.waitForLoadState("networkidle");

  const library = mapChunks();
  expect(library.length).toBeGreaterThan(0);
  const own = [...scripts].filter((path) => path.startsWith("/_next/") && !library.some((name) => path.endsWith(`/${name}`)));
  expect([...scripts].some((path) => library.some((name) => path.endsWith(`/${name}`)))).toBe(true);
  expect(own.length).toBeGreaterThan(5);
  const bytes = own.map((path) => gzipSync(readFileSync(new URL(path.replace("/_next/static/chunks/", ""), CHUNKS))).length);
  expect(bytes.reduce((sum, size) => sum + size, 0)).toBeLessThanOrEqual(MOST_BYTES);
});

test("the list answers to input before the map library is asked for", async ({ page, signIn }) => {
  await signIn("engineer");
  const asked: boolean[] = [];
  for (const name of mapChunks()) {
    await page.route(`**/${name}`, async (route) => {
      // Listeners of a row are there once the list is usable.
      asked.push(await page.evaluate(() => Object.keys(document.querySelector("[data-row] button") ?? {}).some((key) => key.startsWith("__reactProps"))));
      await route.abort();
    });
  }
  await page.goto("/screen");
  await expect.poll(() => asked.length).toBeGreaterThan(0);
  expect(asked).not.toContain(false);

  // And it stays usable where the library never comes.
  const table = page.getByRole("table", { name: "Junctions, ranked" });
  await table.getByRole("row").nth(1).getByRole("button").click();
  await expect(page.getByTestId("explanation")).toContainText(/vehicles seen/);
  await expect(page.getByText("The map could not be drawn.")).toBeVisible();
});
