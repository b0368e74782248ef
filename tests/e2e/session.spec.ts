import { encode } from "next-auth/jwt";
import { expect, onDatabase, signInAs, test, userIdOf } from "@tests/support/browser";

const HOUR_MS = 3_600_000;
const url = () => process.env.E2E_URL ?? "";

async function cookie(claims: Record<string, unknown>, secret = process.env.NEXTAUTH_SECRET ?? "") {
  return { name: "tailmark-session", value: await encode({ token: claims, secret }), url: url() };
}

test("a session ends after its hours, however often it was used", async ({ page, context }) => {
  const userId = await userIdOf("engineer@varnmouth.example");
  // The account is younger than the session that is made up here.
  await onDatabase("update users set sessions_valid_from = now() - interval '1 day' where id = $1", [userId]);
  await context.addCookies([await cookie({ userId, signedInAtMs: Date.now() - 11.9 * HOUR_MS })]);
  await page.goto("/screen");
  await expect(page).toHaveURL(/\/screen/);
  await context.addCookies([await cookie({ userId, signedInAtMs: Date.now() - 12.1 * HOUR_MS })]);
  await page.goto("/screen");
  await expect(page).toHaveURL(/\/sign-in\?next=%2Fscreen$/);
});

test("a cookie that another secret signed, or that names nobody, opens nothing", async ({ page, context }) => {
  const userId = await userIdOf("admin@varnmouth.example");
  const forged = [
    await cookie({ userId, signedInAtMs: Date.now() }, "another secret of more than thirty-two characters"),
    await cookie({ userId: "6f1c2a54-0b0e-4c39-9d56-0d3d7a1f2b3c", signedInAtMs: Date.now() }),
    await cookie({ sub: userId }),
    { name: "tailmark-session", value: "no token at all", url: url() },
  ];
  for (const bad of forged) {
    await context.addCookies([bad]);
    await page.goto("/admin/people");
    await expect(page).toHaveURL(/\/sign-in/);
  }
});

test("a page of another site cannot make a change with a person's cookie", async ({ context }) => {
  await signInAs(context, "engineer");
  const post = (headers: Record<string, string>) => context.request.post("/api/uploads?kind=pings", { headers, data: "x" });
  expect((await post({ origin: "http://elsewhere.example" })).status()).toBe(403);
  expect((await post({ "sec-fetch-site": "cross-site" })).status()).toBe(403);
  expect((await post({ origin: url(), "sec-fetch-site": "same-origin" })).status()).not.toBe(403);
});

test("pages name their own scripts, run no others, and cannot be framed", async ({ page, signIn }) => {
  const complaints: string[] = [];
  page.on("console", (message) => {
    if (/content security policy/i.test(message.text())) complaints.push(message.text());
  });
  const nonces = new Set<string>();
  const visit = async (path: string) => {
    const response = await page.goto(path);
    const policy = (await response?.allHeaders())?.["content-security-policy"] ?? "";
    expect(policy).toContain("'strict-dynamic'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toMatch(/script-src[^;]*'unsafe-/);
    nonces.add(/'nonce-([^']+)'/.exec(policy)?.[1] ?? "");
  };
  await visit("/sign-in");
  await visit("/forgot");
  await visit("/nowhere");
  await signIn("admin");
  await visit("/admin/people");
  await visit("/methods");
  expect(nonces.size).toBe(5);
  expect(complaints).toEqual([]);
});

test("the link of a stranger leads nowhere else after sign-in", async ({ page }) => {
  await page.goto("/sign-in?next=//elsewhere.example/");
  await page.getByLabel("E-mail address").fill("reader@varnmouth.example");
  await page.getByLabel("Password").fill("varnmouth-reader");
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page).toHaveURL(`${url()}/hotspots`);
});
