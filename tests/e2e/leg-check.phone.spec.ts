import { expect, test } from "@tests/support/browser";

test("the leg check fits a phone held upright", async ({ page, signIn, expectAccessible }) => {
  await signIn("engineer");
  await page.goto("/data/legs");
  await page.getByRole("list", { name: /most doubtful first/ }).getByRole("link").first().click();
  const plan = page.getByRole("group", { name: /^Plan of the legs of/ });
  await expect(plan).toBeVisible();
  const overflowPx = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  expect(overflowPx).toBe(0);
  await expectAccessible();
});
