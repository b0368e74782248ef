import { Readable } from "node:stream";
import { beforeAll, describe, expect, it } from "vitest";
import { ScreenQuery } from "@/domain/screen";
import { cityCatalogue } from "@/services/catalogue/catalogue";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { listSlices, loadScreenDays } from "@/services/screens/screen-data";
import { screenTag } from "@/services/screens/screen-tag";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import type { UploadKind } from "@/domain/upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

const EVERY = { days: "every" } as const;
const everyDay = ScreenQuery.parse({ period: "all", days: "every" });

async function upload(kind: UploadKind, name: string, content: string): Promise<void> {
  const received = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId: received.uploadId, mapping: received.detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId: received.uploadId });
}

const load = async (mostBytes?: number) => loadScreenDays(engineer.db, EVERY, await cityCatalogue(engineer.db), mostBytes);
const pings = (day: string, hour: string, vehicles: number) => crossingPings({ startMs: Date.parse(`2026-03-${day}T${hour}:00:00Z`), vehicles });

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
  for (const day of ["02", "03", "04"]) await upload("pings", `${day}.csv`, pings(day, "08", 40));
});

describe("days held in memory", () => {
  it("are read once, and only the day for which a file has come is read anew", async () => {
    const before = await load();
    expect(before.days.length).toBe(3);
    expect((await load()).days.map((day, k) => day === before.days[k])).toEqual([true, true, true]);
    await upload("pings", "late.csv", pings("03", "14", 20));
    const after = await load();
    expect(after.days.map((day, k) => day === before.days[k])).toEqual([true, false, true]);
    expect(after.days[1].passed.length).toBeGreaterThan(before.days[1].passed.length);
  });

  it("are the newest that fit, and the answer says how many do not", async () => {
    const whole = await load();
    const sizes = (await listSlices(engineer.db)).map(({ day, bytes }) => ({ day, bytes }));
    const newest = sizes.filter(({ day }) => day === whole.lastDay).reduce((sum, { bytes }) => sum + bytes, 0);
    const narrow = await load(newest);
    expect(narrow).toMatchObject({ firstDay: whole.lastDay, lastDay: whole.lastDay, daysLeftOut: 2 });
    expect(await load(newest - 1)).toMatchObject({ days: [], firstDay: null, daysLeftOut: 3 });
    // What was forgotten to make room comes back as it was.
    expect((await load()).days).toEqual(whole.days);
  });

  it("are shared by questions that come at the same moment", async () => {
    await upload("pings", "other.csv", pings("04", "16", 20));
    const [one, other] = await Promise.all([load(), load()]);
    expect(one.days.map((day, k) => day === other.days[k])).toEqual([true, true, true]);
  });
});

describe("the tag of a ranking", () => {
  it("stays as long as the answer does, and goes with the data, the hours, the dates and the turn", async () => {
    const tag = (query: Partial<ScreenQuery>) => screenTag(engineer, { ...everyDay, ...query });
    const before = await tag({});
    expect(before).toMatch(/^W\/"[\w.-]+"$/);
    expect(await tag({})).toBe(before);
    // Filters that only choose among rows leave the figures as they are.
    expect(await tag({ minDelay: 30, q: "x", sort: "delay" })).toBe(before);
    const others = [{ period: "am" as const }, { days: "sunday" as const }, { since: "2026-03-03" }, { until: "2026-03-03" }, { turn: "left" as const }];
    const tags = await Promise.all(others.map(tag));
    expect(new Set([before, ...tags]).size).toBe(others.length + 1);
    await upload("pings", "more.csv", pings("05", "08", 20));
    expect(await tag({})).not.toBe(before);
  });
});

describe("figures of a ranking", () => {
  it("are sent to a tenth of what is shown", async () => {
    const { rows } = await rankJunctions(engineer, everyDay);
    const text = JSON.stringify(rows.find((row) => row.delay !== null));
    expect(text).not.toMatch(/\d\.\d{7}/);
    expect(text).toMatch(/"delay":\{"value":\d+(\.\d{1,2})?,/);
  });
});
