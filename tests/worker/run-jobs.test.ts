import { sql } from "drizzle-orm";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { z } from "zod";
import { AppError } from "@/domain/errors";
import { defineJob } from "@/jobs/job";
import { prepareQueues } from "@/jobs/queue";
import { handler, type Handler, type Run } from "@/worker/handler";
import { runJobs, type JobRunner } from "@/worker/run-jobs";
import { expectLoggedErrors } from "@tests/support/setup";
import { testContext, testPlace, type TestContext } from "@tests/support/database";

const payload = z.object({ n: z.number() });
const plain = defineJob({ name: "count-plain", payload, retries: 2, timeoutS: 60 });
const keyed = defineJob({ name: "count-keyed", payload, retries: 2, timeoutS: 60, key: ({ n }) => String(n) });

let ctx: TestContext;
let runner: JobRunner | undefined;

beforeEach(async () => {
  ctx = await testContext("job");
  await prepareQueues((await testPlace()).url, [plain, keyed]);
  await ctx.db.execute(sql`delete from pgboss.job`);
});

afterEach(async () => {
  await runner?.stop();
  runner = undefined;
});

async function start(...handlers: Handler[]): Promise<void> {
  const { url, database } = await testPlace();
  runner = await runJobs({ databaseUrl: url, pool: database.pool, handlers, concurrency: 1, contextFor: () => ctx });
}

interface JobRow extends Record<string, unknown> {
  state: string;
  retry_count: number;
  output: { refused?: string; message?: string } | null;
}

async function jobs(): Promise<JobRow[]> {
  const { rows } = await ctx.db.execute<JobRow>(sql`select state, retry_count, output from pgboss.job where name like 'count-%' order by created_on, id`);
  return rows;
}

const states = async () => (await jobs()).map((job) => job.state);

/** A job that has failed waits before its next run; tests do not. */
async function skipWaiting(): Promise<void> {
  await ctx.db.execute(sql`update pgboss.job set start_after = now() where state = 'retry'`);
}

describe("queueing", () => {
  it("goes with the transaction: what is rolled back was never queued", async () => {
    await expect(
      ctx.db.transaction(async (tx) => {
        await ctx.queue.enqueue(plain, { n: 1 }, { db: tx });
        throw new Error("changed my mind");
      }),
    ).rejects.toThrow("changed my mind");
    expect(await states()).toEqual([]);
    await ctx.db.transaction((tx) => ctx.queue.enqueue(plain, { n: 1 }, { db: tx }));
    expect(await states()).toEqual(["created"]);
  });

  it("keeps one waiting job of a key, however often it is asked for", async () => {
    const answers = await Promise.all([1, 1, 1, 2].map((n) => ctx.queue.enqueue(keyed, { n })));
    expect(answers.filter(Boolean)).toHaveLength(2);
    expect(await states()).toEqual(["created", "created"]);
  });

  it("keeps every job that has no key", async () => {
    for (const n of [1, 1, 1]) expect(await ctx.queue.enqueue(plain, { n })).toBe(true);
    expect(await states()).toHaveLength(3);
  });

  it("refuses a payload of the wrong shape at once", async () => {
    await expect(ctx.queue.enqueue(plain, { n: "one" } as unknown as { n: number })).rejects.toThrow("expected number");
  });
});

describe("running", () => {
  it("hands the payload to the handler and finishes the job", async () => {
    const seen: number[] = [];
    await ctx.queue.enqueue(plain, { n: 7 });
    await start(handler(plain, async (_ctx, { n }) => void seen.push(n)));
    await vi.waitFor(async () => expect(await states()).toEqual(["completed"]), 10_000);
    expect(seen).toEqual([7]);
  });

  it("tries a failed job again, counts the runs, and gives up after the last", async () => {
    expectLoggedErrors();
    const runs: Pick<Run, "attempt" | "isLast">[] = [];
    await ctx.queue.enqueue(plain, { n: 1 });
    await start(
      handler(plain, async (_ctx, _payload, { attempt, isLast }) => {
        runs.push({ attempt, isLast });
        throw new Error("the disk is full");
      }),
    );
    await vi.waitFor(
      async () => {
        await skipWaiting();
        expect(await states()).toEqual(["failed"]);
      },
      { timeout: 20_000, interval: 200 },
    );
    expect(runs).toEqual([
      { attempt: 1, isLast: false },
      { attempt: 2, isLast: false },
      { attempt: 3, isLast: true },
    ]);
    expect((await jobs())[0].output?.message).toBe("the disk is full");
  });

  it("does not try again what was refused for good", async () => {
    expectLoggedErrors();
    let runs = 0;
    await ctx.queue.enqueue(plain, { n: 1 });
    await start(
      handler(plain, async () => {
        runs += 1;
        throw new AppError("not_found", "Upload 1 does not exist.");
      }),
    );
    await vi.waitFor(async () => expect(await states()).toEqual(["completed"]), 10_000);
    expect(runs).toBe(1);
    expect((await jobs())[0].output).toEqual({ refused: "Upload 1 does not exist." });
  });

  it("takes over a job whose worker has died", async () => {
    await ctx.queue.enqueue(plain, { n: 5 });
    // Left as a killed worker leaves it: counted as running, with nobody holding its lock.
    await ctx.db.execute(sql`update pgboss.job set state = 'active', started_on = now() - interval '1 minute'`);
    const seen: number[] = [];
    await start(handler(plain, async (_ctx, { n }) => void seen.push(n)));
    await skipWaiting();
    await vi.waitFor(async () => expect(await states()).toEqual(["completed"]), 10_000);
    expect(seen).toEqual([5]);
    expect((await jobs())[0].retry_count).toBe(1);
  });

  it("leaves a job alone whose worker lives, however long it runs", async () => {
    const { database } = await testPlace();
    await ctx.queue.enqueue(plain, { n: 5 });
    const { rows } = await ctx.db.execute<{ id: string }>(sql`update pgboss.job set state = 'active', started_on = now() - interval '1 hour' returning id`);
    const other = await database.pool.connect();
    await other.query("select pg_advisory_lock(hashtextextended($1, 0))", [rows[0].id]);
    await start(handler(plain, async () => undefined));
    expect(await states()).toEqual(["active"]);
    other.release(true);
  });

  it("gives a job up whose workers have died as often as it may run", async () => {
    await ctx.queue.enqueue(plain, { n: 5 });
    await ctx.db.execute(sql`update pgboss.job set state = 'active', retry_count = retry_limit, started_on = now() - interval '1 minute'`);
    const givenUp: number[] = [];
    await start(handler(plain, async () => undefined, async (_ctx, { n }) => void givenUp.push(n)));
    expect(await states()).toEqual(["failed"]);
    expect(givenUp).toEqual([5]);
  });

  it("runs a job again that a stopping worker left off, even on its last run, and counts it as none", async () => {
    await ctx.queue.enqueue(plain, { n: 9 });
    await ctx.db.execute(sql`update pgboss.job set state = 'retry', retry_count = retry_limit - 1, started_on = now()`);
    const isLast: boolean[] = [];
    await start(
      handler(plain, async (_ctx, _payload, run) => {
        isLast.push(run.isLast);
        await new Promise((_, reject) => run.signal.addEventListener("abort", () => reject(new Error("connection lost"))));
      }),
    );
    await vi.waitFor(() => expect(isLast).toEqual([true]), 10_000);
    await runner?.stop();
    expect((await jobs())[0]).toMatchObject({ state: "retry", retry_count: 2 });
    await skipWaiting();
    await start(handler(plain, async (_ctx, _payload, run) => void isLast.push(run.isLast)));
    await vi.waitFor(async () => expect(await states()).toEqual(["completed"]), 10_000);
    expect(isLast).toEqual([true, true]);
  });

  it("tells a running job that the worker is to stop, and hands it back", async () => {
    await ctx.queue.enqueue(plain, { n: 1 });
    let started = false;
    await start(
      handler(plain, async (_ctx, _payload, { signal }) => {
        started = true;
        await new Promise((_, reject) => signal.addEventListener("abort", () => reject(signal.reason)));
      }),
    );
    await vi.waitFor(() => expect(started).toBe(true), 10_000);
    await runner?.stop();
    runner = undefined;
    await vi.waitFor(async () => expect(await states()).toEqual(["retry"]), 5_000);
  });
});
