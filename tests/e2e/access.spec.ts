import { readdirSync } from "node:fs";
import { Client } from "pg";
import type { APIRequestContext } from "@playwright/test";
import { ROLES, type Role } from "@/domain/actor";
import { expect, test } from "@tests/support/browser";

type Who = readonly Role[] | "anyone";

/** Who may open each page and each route; what stands in src/app and not here fails the test below. */
const PAGES: Record<string, Who> = {
  "/": ROLES,
  "/admin": ["admin"],
  "/admin/audit": ["admin"],
  "/admin/mail": ["admin"],
  "/admin/people": ["admin"],
  "/admin/settings": ["admin"],
  "/data": ["engineer", "admin"],
  "/data/[uploadId]": ["engineer", "admin"],
  "/data/legs": ["engineer", "admin"],
  "/data/legs/[junctionId]": ["engineer", "admin"],
  "/hotspots": ROLES,
  "/hotspots/[reportId]": ROLES,
  "/junctions": ["engineer", "technician", "admin"],
  "/junctions/[junctionId]": ["engineer", "technician", "admin"],
  "/legs/[legId]": ["engineer", "technician", "admin"],
  "/methods": ["engineer", "technician", "admin"],
  "/screen": ["engineer", "admin"],
  "/forgot": "anyone",
  "/set-password": "anyone",
  "/sign-in": "anyone",
};

const ROUTES: Record<string, Who> = {
  "GET /api/corridors": ["engineer", "admin"],
  "GET /api/coverage": ["engineer", "admin"],
  "GET /api/hotspots": ROLES,
  "GET /api/hotspots/[reportId]": ROLES,
  "GET /api/hotspots/[reportId]/export": ROLES,
  "GET /api/junctions": ["engineer", "technician", "admin"],
  "GET /api/junctions/[junctionId]": ["engineer", "technician", "admin"],
  "GET /api/junctions/[junctionId]/cloud": ["engineer", "admin"],
  "GET /api/junctions/[junctionId]/legs": ["engineer", "admin"],
  "GET /api/legs": ["engineer", "admin"],
  "GET /api/legs/[legId]": ["engineer", "technician", "admin"],
  "GET /api/legs/[legId]/tracks": ["engineer", "technician", "admin"],
  "GET /api/legs/[legId]/export": ["engineer", "admin"],
  "GET /api/screen": ["engineer", "admin"],
  "GET /api/screen/export": ["engineer", "admin"],
  "GET /api/suppliers": ["engineer"],
  "GET /api/uploads": ["engineer", "admin"],
  "GET /api/uploads/[uploadId]": ["engineer", "admin"],
  "GET /api/uploads/[uploadId]/detected": ["engineer"],
  "GET /api/uploads/[uploadId]/rejects": ["engineer", "admin"],
  "DELETE /api/uploads/[uploadId]": ["engineer"],
  "POST /api/uploads": ["engineer"],
  "POST /api/uploads/[uploadId]/start": ["engineer"],
  "POST /api/uploads/parts": ["engineer"],
  "HEAD /api/uploads/parts/[partId]": ["engineer"],
  "PATCH /api/uploads/parts/[partId]": ["engineer"],
  "DELETE /api/uploads/parts/[partId]": ["engineer"],
};

/** For suppliers' machines: a session opens nothing here, a token does. */
const TOKEN_ROUTES = ["POST /api/v1/pings"];

/** For everyone, signed in or not. */
const OPEN_ROUTES = ["GET /api/v1/openapi.json"];

const APP = new URL("../../src/app", import.meta.url).pathname;

/** Addresses of all files of one name below src/app, groups left out. */
function addressesOf(fileName: string): string[] {
  return readdirSync(APP, { recursive: true, encoding: "utf8" })
    .filter((path) => path === fileName || path.endsWith(`/${fileName}`))
    .map((path) => `/${path.split("/").slice(0, -1).filter((part) => !part.startsWith("(")).join("/")}`)
    .filter((address) => !address.startsWith("/api/auth/"))
    .sort();
}

let ids: Record<string, string>;

test.beforeAll(async () => {
  const client = new Client({ connectionString: process.env.DATABASE_URL });
  await client.connect();
  const one = async (sql: string) => String((await client.query<{ id: string | number }>(sql)).rows[0].id);
  await client.query(
    `insert into hotspot_reports (title, query, result, published_at)
     select 'Access walk', '{}', '{"rows":[],"total":0,"basis":{"firstDate":null,"lastDate":null,"days":0,"traversals":0,"medianIntervalS":null,"methodVersion":1,"fromMin":0,"toMin":1440}}', now()
     where not exists (select 1 from hotspot_reports where title = 'Access walk')`,
  );
  ids = {
    junctionId: await one("select id from junctions order by id limit 1"),
    legId: await one("select id from legs order by id limit 1"),
    uploadId: await one("select id from uploads order by created_at limit 1"),
    partId: "0".repeat(32),
    reportId: await one("select id from hotspot_reports where title = 'Access walk'"),
  };
  await client.end();
});

const filled = (address: string) => address.replace(/\[(\w+)\]/g, (_, name: string) => ids[name]);
const isAllowed = (who: Who, role: Role) => who === "anyone" || who.includes(role);

test("every page and route has its line in the table", () => {
  expect(addressesOf("page.tsx")).toEqual(Object.keys(PAGES).sort());
  expect(addressesOf("route.ts")).toEqual([...new Set([...Object.keys(ROUTES), ...TOKEN_ROUTES, ...OPEN_ROUTES].map((key) => key.split(" ")[1]))].sort());
});

async function call(request: APIRequestContext, key: string): Promise<number> {
  const [method, address] = key.split(" ");
  const query = address === "/api/suppliers" ? "?kind=pings" : address === "/api/uploads" && method === "POST" ? "?kind=pings" : "";
  const response = await request.fetch(`${filled(address)}${query}`, { method, maxRedirects: 0, ...(method === "POST" && { data: "{}" }) });
  return response.status();
}

for (const role of ROLES) {
  test(`routes answer the ${role} by the table`, async ({ page, signIn }) => {
    await signIn(role);
    const wrong: string[] = [];
    for (const [key, who] of Object.entries(ROUTES)) {
      const status = await call(page.request, key);
      // An allowed call may still be refused for what it asks; it is never a matter of permission or a fault.
      const isRight = isAllowed(who, role) ? status !== 401 && status !== 403 && status < 500 : status === 403;
      if (!isRight) wrong.push(`${key}: ${status}`);
    }
    for (const key of TOKEN_ROUTES) if ((await call(page.request, key)) !== 401) wrong.push(key);
    for (const key of OPEN_ROUTES) if ((await call(page.request, key)) !== 200) wrong.push(key);
    expect(wrong).toEqual([]);
  });

  test(`pages open for the ${role} by the table`, async ({ page, signIn }) => {
    await signIn(role);
    const wrong: string[] = [];
    for (const [address, who] of Object.entries(PAGES)) {
      const status = (await page.request.get(filled(address))).status();
      if (status !== (isAllowed(who, role) ? 200 : 403)) wrong.push(`${address}: ${status}`);
    }
    expect(wrong).toEqual([]);
  });
}

test("pages of what does not exist answer 404", async ({ page, signIn }) => {
  await signIn("engineer");
  const none = "00000000-0000-4000-8000-000000000000";
  const wrong: string[] = [];
  for (const address of ["/junctions/999999", "/junctions/first", "/junctions/99999999999", "/legs/999999", "/data/legs/999999", `/data/${none}`, `/hotspots/${none}`, "/nowhere"]) {
    const status = (await page.request.get(address)).status();
    if (status !== 404) wrong.push(`${address}: ${status}`);
  }
  expect(wrong).toEqual([]);
});

test("signed out, routes answer 401 and pages lead to the sign-in", async ({ page }) => {
  const wrong: string[] = [];
  for (const key of Object.keys(ROUTES)) {
    const status = await call(page.request, key);
    if (status !== 401) wrong.push(`${key}: ${status}`);
  }
  for (const key of TOKEN_ROUTES) if ((await call(page.request, key)) !== 401) wrong.push(key);
  for (const key of OPEN_ROUTES) if ((await call(page.request, key)) !== 200) wrong.push(key);
  for (const [address, who] of Object.entries(PAGES)) {
    await page.goto(filled(address));
    const isAtSignIn = new URL(page.url()).pathname === "/sign-in";
    if (isAtSignIn !== (who !== "anyone" || address === "/sign-in")) wrong.push(address);
  }
  expect(wrong).toEqual([]);
});
