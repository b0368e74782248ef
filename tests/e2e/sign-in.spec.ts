import { readdir, readFile } from "node:fs/promises";
import { join } from "node:path";
import { expect, test } from "@tests/support/browser";

test("a person signs in with the form, comes to the page that was asked for, and signs out", async ({ page, expectAccessible }) => {
  await page.goto("/admin/people");
  await expect(page).toHaveURL(/\/sign-in\?next=%2Fadmin%2Fpeople$/);
  await expectAccessible();

  await page.getByLabel("E-mail address").fill("admin@varnmouth.example");
  await page.getByLabel("Password").fill("not the password");
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page.getByText("That did not work.")).toBeVisible();

  await page.getByLabel("Password").fill("varnmouth-admin");
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page.getByRole("heading", { name: "Invite a person" })).toBeVisible();

  // The page is there before it listens; a person would press again, too.
  await expect(async () => {
    await page.getByRole("button", { name: /Varnmouth, admin/ }).click();
    await expect(page.getByRole("button", { name: "Sign out" })).toBeVisible({ timeout: 2000 });
  }).toPass();
  await page.getByRole("button", { name: "Sign out" }).click();
  await expect(page).toHaveURL(/\/sign-in$/);
  await page.goto("/admin/people");
  await expect(page).toHaveURL(/\/sign-in\?next/);
});

test("an unknown account and a wrong password are answered alike", async ({ page }) => {
  const answers: string[] = [];
  for (const email of ["nobody@varnmouth.example", "reader@varnmouth.example"]) {
    await page.goto("/sign-in");
    await page.getByLabel("E-mail address").fill(email);
    await page.getByLabel("Password").fill("not the password");
    await page.getByRole("button", { name: "Sign in" }).click();
    answers.push((await page.getByText("That did not work.").textContent()) ?? "");
  }
  expect(answers[0]).toBe(answers[1]);
});

test("an administrator invites a person, who takes it up by mail, is given another role, and is shut out", async ({ page, browser, signIn, expectAccessible }) => {
  await signIn("admin");
  await page.goto("/admin/people");
  await expect(page.getByRole("button", { name: "Invite" })).toBeEnabled();
  await page.getByLabel("E-mail address").fill("nell.brook@varnmouth.example");
  await page.getByLabel("Name").fill("Nell Brook");
  await page.getByLabel("Role", { exact: true }).selectOption("reader");
  await page.getByRole("button", { name: "Invite" }).click();
  await expect(page.getByText("A mail with a link to begin goes to nell.brook@varnmouth.example.")).toBeVisible();
  await expectAccessible();

  const link = await linkMailedTo("nell.brook@varnmouth.example");
  const other = await browser.newContext({ baseURL: process.env.E2E_URL });
  const nell = await other.newPage();
  await nell.goto(link);
  await nell.getByLabel("New password").fill("reeds by the river");
  await nell.getByLabel("The same again").fill("reeds by the river");
  await nell.getByRole("button", { name: "Set the password" }).click();
  await nell.getByRole("link", { name: "To the sign-in" }).click();
  await nell.getByLabel("E-mail address").fill("nell.brook@varnmouth.example");
  await nell.getByLabel("Password").fill("reeds by the river");
  await nell.getByRole("button", { name: "Sign in" }).click();
  await expect(nell).toHaveURL(/\/hotspots$/);
  await nell.goto(link);
  await expect(nell.getByText("This link no longer works")).toBeVisible();

  const row = page.getByRole("row", { name: /Nell Brook/ });
  await page.reload();
  await row.getByLabel("Role of Nell Brook").selectOption("technician");
  await row.getByRole("button", { name: "Save role" }).click();
  await expect(row.getByRole("button", { name: "Save role" })).toBeHidden();
  await nell.goto("/");
  await expect(nell).toHaveURL(/\/junctions/);

  await row.getByRole("button", { name: "Disable" }).click();
  await expect(row.getByRole("button", { name: "Enable" })).toBeVisible();
  await nell.goto("/junctions");
  await expect(nell).toHaveURL(/\/sign-in/);
  await other.close();

  await page.goto("/admin/audit");
  for (const action of ["invited", "took up invitation", "changed role", "disabled"]) {
    await expect(page.getByRole("cell", { name: action, exact: true }).first()).toBeVisible();
  }
  await expectAccessible();
  await page.goto("/admin/mail");
  await page.getByText("Your account for Tailmark in Varnmouth").first().click();
  await expect(page.getByText("Good day Nell Brook,").first()).toBeVisible();
  await expectAccessible();
});

test("an administrator changes a period and the city keeps it", async ({ page, signIn, expectAccessible }) => {
  await signIn("admin");
  await page.goto("/admin/settings");
  await expectAccessible();
  await expect(page.getByRole("button", { name: "Save settings" })).toBeEnabled();
  await page.getByLabel("evening to").selectOption({ label: "22:30" });
  await page.getByRole("button", { name: "Save settings" }).click();
  await expect(page.getByText("Saved.")).toBeVisible();
  await page.reload();
  await expect(page.getByLabel("evening to")).toHaveValue("1350");
});

for (const role of ["engineer", "technician", "reader"] as const) {
  test(`the ${role} is refused administration in so many words`, async ({ page, signIn }) => {
    await signIn(role);
    for (const path of ["/admin/people", "/admin/settings", "/admin/mail", "/admin/audit"]) {
      await page.goto(path);
      await expect(page.getByText("Your role does not open this page.")).toBeVisible();
    }
  });
}

/** The link in the newest mail to the address, as the local stand-in for a mail server kept it. */
async function linkMailedTo(email: string): Promise<string> {
  const folder = join(process.env.DATA_DIR ?? "", "kept-mail");
  let link: string | undefined;
  await expect
    .poll(async () => {
      const names = (await readdir(folder).catch(() => [] as string[])).sort();
      const mails = await Promise.all(names.map(async (name) => JSON.parse(await readFile(join(folder, name), "utf8")) as { to: string; text: string }));
      link = mails.filter((mail) => mail.to.includes(email)).at(-1)?.text.match(/https?:\/\/\S+/)?.[0];
      return link;
    })
    .toBeTruthy();
  return link ?? "";
}

test("the pages for a lost password leave nothing that axe finds", async ({ page, expectAccessible }) => {
  for (const path of ["/forgot", "/set-password", "/set-password?token=not-a-token"]) {
    await page.goto(path);
    await expect(page.getByRole("heading", { level: 1 })).toBeVisible();
    await expectAccessible();
  }
});
