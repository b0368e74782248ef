import type { Browser } from "@playwright/test";
import type { Pool } from "pg";
import { figure, p95, type Figure } from "./figures";
import { openBrowser, PATIENCE_MS, settled, visitAs, type Probe, type Visit } from "./browser-visit";
import type { Product } from "./product";

const SCRIPTS_KB = 250;
const FIRST_PAGE_MS = 1000;
const REPAINT_MS = 250;
const FRAMES_PER_S = 50;
const FRAME_MS = 1000 / 60;
const LOADS = 7;
const MOVING_MS = 3000;
/** Minimum delays, as a person jumps about with the slider. */
const MINIMA_S = [10, 35, 20, 38, 30, 0, 36, 15, 32, 5, 25, 37, 28, 0, 30, 38, 10, 34, 20, 36];
const HOURS = ["AM peak", "midday", "evening", "all day", "PM peak"];
const DAYS = ["Saturdays", "all days"];

/** What a person at a browser waits for, on a warm server, in Chromium with WebGL drawn by software. */
export async function benchBrowser(product: Product, pool: Pool): Promise<Figure[]> {
  const browser = await openBrowser();
  try {
    const figures = await firstPages(browser, product);
    figures.push(...(await filterChanges(browser, product)));
    figures.push(...(await movements(browser, product)));
    const { rows } = await pool.query<{ id: number }>("select min(id) as id from legs");
    figures.push(await strips(browser, product, rows[0].id));
    return figures;
  } finally {
    await browser.close();
  }
}

async function firstPages(browser: Browser, product: Product): Promise<Figure[]> {
  const times: number[] = [];
  let scriptsKb = 0;
  for (let i = 0; i <= LOADS; i++) {
    const visit = await visitAs(browser, product, "engineer");
    await visit.page.goto(`${product.baseUrl}/screen`);
    const { rowsAtMs } = await settledMap(visit);
    // The first load warms the server: the slices are decoded once for all people.
    if (i > 0) times.push(rowsAtMs);
    scriptsKb = (await ownScriptBytes(visit)) / 1000;
    await visit.close();
  }
  return [
    figure("scripts of the Screen page, map library aside", scriptsKb, "kB", "bound", SCRIPTS_KB),
    figure("navigation to ranked rows on the screen, p95", p95(times), "ms", "bound", FIRST_PAGE_MS),
  ];
}

/** Everything but what carries the map library. */
async function ownScriptBytes({ page, scripts }: Visit): Promise<number> {
  let bytes = 0;
  for (const [url, size] of scripts) {
    if (url.includes("maplibre")) continue;
    const text = await (await page.request.get(url)).text();
    if (!text.includes("maplibregl")) bytes += size;
  }
  return bytes;
}

async function filterChanges(browser: Browser, product: Product): Promise<Figure[]> {
  const visit = await visitAs(browser, product, "engineer");
  await visit.page.goto(`${product.baseUrl}/screen?sort=delay&dir=asc`);
  await settledMap(visit);
  await visit.page.getByRole("button", { name: /^Minimum delay:/ }).click();
  const slider = visit.page.getByRole("slider");
  const byRows: number[] = [];
  for (const minimumS of MINIMA_S) byRows.push(await repaintMs(visit, () => slider.fill(String(minimumS))));
  await visit.page.keyboard.press("Escape");

  const byFigures: number[] = [];
  for (const days of DAYS) {
    await choose(visit, "Days", days);
    await visit.page.keyboard.press("Escape");
    for (const hours of HOURS) byFigures.push(await repaintMs(visit, () => choose(visit, "Hours", hours)));
  }
  await visit.close();
  return [
    figure("minimum delay moved, to table and map, p95", p95(byRows), "ms", "bound", REPAINT_MS),
    figure("other hours chosen, to table and map, p95", p95(byFigures), "ms", "bound", REPAINT_MS),
  ];
}

async function choose({ page }: Visit, control: string, label: string): Promise<void> {
  const panel = page.getByRole("dialog", { name: control });
  if (!(await panel.isVisible())) await page.getByRole("button", { name: new RegExp(`^${control}:`) }).click();
  await panel.getByRole("radio", { name: new RegExp(`^${label}`) }).check();
}

/** From the input to the later of the frames with the new rows and with the new features. */
async function repaintMs(visit: Visit, act: () => Promise<unknown>): Promise<number> {
  const before = await settled(visit);
  await act();
  await visit.page.waitForFunction(
    ({ listAtMs, mapAtMs }) => {
      const { tailmarkProbe: now } = globalThis as unknown as { tailmarkProbe: Probe };
      return now.listAtMs > listAtMs && now.mapAtMs > mapAtMs;
    },
    before,
    { timeout: PATIENCE_MS },
  );
  const probe = await settled(visit);
  return Math.max(probe.listAtMs, probe.mapAtMs) - probe.inputAtMs;
}

async function movements(browser: Browser, product: Product): Promise<Figure[]> {
  const visit = await visitAs(browser, product, "engineer");
  const { page, cdp } = visit;
  await page.goto(`${product.baseUrl}/screen?evidence=none`);
  await settledMap(visit);
  const list = await boxOf(visit, "[data-scrolls]");
  const scrolled = await framesDuring(visit, "frames", () =>
    cdp.send("Input.synthesizeScrollGesture", { ...list, yDistance: -MOVING_MS * 3, speed: 3000, gestureSourceType: "mouse", preventFling: true }),
  );
  const map = await boxOf(visit, "canvas.maplibregl-canvas");
  const panned = await framesDuring(visit, "mapFrames", () => drag(visit, map));
  await visit.close();
  return [
    figure("scrolling the table", scrolled, "1/s", "at least", FRAMES_PER_S),
    figure("panning the map", panned, "1/s", "at least", FRAMES_PER_S),
  ];
}

async function boxOf({ page }: Visit, selector: string): Promise<{ x: number; y: number }> {
  const box = await page.locator(selector).boundingBox();
  if (!box) throw new Error(`Nothing to move at ${selector}.`);
  return { x: Math.round(box.x + box.width / 2), y: Math.round(box.y + box.height / 2) };
}

async function drag({ page }: Visit, { x, y }: { x: number; y: number }): Promise<void> {
  await page.mouse.move(x, y);
  await page.mouse.down();
  const startMs = performance.now();
  for (let ms = 0; ms < MOVING_MS; ms = performance.now() - startMs) {
    const turn = (ms / MOVING_MS) * 2 * Math.PI;
    await page.mouse.move(x + 150 * Math.sin(turn), y + 90 * Math.sin(2 * turn));
  }
  await page.mouse.up();
}

async function framesDuring(visit: Visit, kind: "frames" | "mapFrames", move: () => Promise<unknown>): Promise<number> {
  const before = (await visit.read())[kind].length;
  const startMs = await visit.page.evaluate(() => performance.now());
  await move();
  const endMs = await visit.page.evaluate(() => performance.now());
  const frames = (await visit.read())[kind].slice(before).filter((ms) => ms >= startMs && ms <= endMs);
  return ((frames.length - 1) / (frames[frames.length - 1] - frames[0])) * 1000;
}

/** Tracks of pooled days, other hours after others: from the last byte to the last stroke. */
async function strips(browser: Browser, product: Product, legId: number): Promise<Figure> {
  const visit = await visitAs(browser, product, "technician");
  await visit.page.goto(`${product.baseUrl}/legs/${legId}`);
  await settled(visit);
  const times: number[] = [];
  for (const days of ["all days", "weekdays"]) {
    await choose(visit, "Days", days);
    for (const hours of HOURS) {
      const { drawnAtMs: beforeMs } = await settled(visit);
      await choose(visit, "Hours", hours);
      await visit.page.waitForFunction((ms) => (globalThis as unknown as { tailmarkProbe: Probe }).tailmarkProbe.drawnAtMs > ms, beforeMs, { timeout: PATIENCE_MS });
      const { inputAtMs, arrivedAtMs, drawnAtMs } = await settled(visit);
      // Hours that were looked at before are in the browser.
      times.push(drawnAtMs - Math.max(arrivedAtMs, inputAtMs));
    }
  }
  await visit.close();
  // The first half warms the compiler.
  return figure("strip, last byte to last stroke, p95", p95(times.slice(HOURS.length)), "ms", "one frame", FRAME_MS);
}

/** The map comes after the table: waits until it has drawn and rests. */
async function settledMap(visit: Visit): Promise<Probe> {
  await visit.page.locator("canvas.maplibregl-canvas").waitFor();
  await visit.page.waitForFunction(() => (globalThis as unknown as { tailmarkProbe: Probe }).tailmarkProbe.mapAtMs > 0);
  return settled(visit);
}
