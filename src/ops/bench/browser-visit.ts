import { readFileSync } from "node:fs";
import { chromium, type Browser, type BrowserContext, type CDPSession, type Page } from "@playwright/test";
import type { Role } from "@/domain/actor";
import { CHROMIUM, CHROMIUM_FLAGS, ensureChromium } from "../setup/chromium.mjs";
import { SESSION_COOKIE, type Product } from "./product";

const PROBE = readFileSync(new URL("./browser-probe.js", import.meta.url), "utf8");
const QUIET_MS = 500;
/** A page that does not change or rest within it is broken. */
export const PATIENCE_MS = 20_000;

/** What `browser-probe.js` notes. */
export interface Probe {
  rowsAtMs: number;
  inputAtMs: number;
  listAtMs: number;
  mapAtMs: number;
  drawnAtMs: number;
  arrivedAtMs: number;
  frames: number[];
  mapFrames: number[];
}

export interface Visit {
  page: Page;
  cdp: CDPSession;
  /** Bytes of the scripts that came, as they were sent, by address. */
  scripts: Map<string, number>;
  read(): Promise<Probe>;
  close(): Promise<void>;
}

export async function openBrowser(): Promise<Browser> {
  await ensureChromium();
  return chromium.launch({ executablePath: CHROMIUM, args: CHROMIUM_FLAGS });
}

/** A page of somebody who comes with an empty cache. */
export async function visitAs(browser: Browser, product: Product, role: Role): Promise<Visit> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, timezoneId: "Pacific/Auckland" });
  await signIn(context, product, role);
  await context.addInitScript({ content: PROBE });
  const page = await context.newPage();
  const cdp = await context.newCDPSession(page);
  await cdp.send("Network.enable");
  return {
    page,
    cdp,
    scripts: scriptsOf(cdp),
    read: () => page.evaluate(() => (globalThis as unknown as { tailmarkProbe: Probe }).tailmarkProbe),
    close: () => context.close(),
  };
}

async function signIn(context: BrowserContext, product: Product, role: Role): Promise<void> {
  await context.addCookies([{ name: SESSION_COOKIE, value: await product.sessionOf(role), url: product.baseUrl, httpOnly: true, sameSite: "Lax" }]);
}

function scriptsOf(cdp: CDPSession): Map<string, number> {
  const bytes = new Map<string, number>();
  const urls = new Map<string, string>();
  cdp.on("Network.requestWillBeSent", ({ requestId, request }) => /\.m?js(\?|$)/.test(request.url) && urls.set(requestId, request.url));
  cdp.on("Network.loadingFinished", ({ requestId, encodedDataLength }) => {
    const url = urls.get(requestId);
    if (url !== undefined) bytes.set(url, encodedDataLength);
  });
  return bytes;
}

/** Waits until list and map have not changed for a while, and answers what was noted till then. */
export async function settled(visit: Visit): Promise<Probe> {
  const deadline = Date.now() + PATIENCE_MS;
  while (Date.now() < deadline) {
    await visit.page.waitForTimeout(QUIET_MS / 2);
    const probe = await visit.read();
    const nowMs = await visit.page.evaluate(() => performance.now());
    const lastMs = Math.max(probe.inputAtMs, probe.listAtMs, probe.mapAtMs, probe.drawnAtMs, probe.arrivedAtMs);
    if (lastMs > 0 && nowMs - lastMs > QUIET_MS) return probe;
  }
  throw new Error(`The page at ${visit.page.url()} did not come to rest.`);
}
