import { randomUUID } from "node:crypto";
import { setTimeout as delay } from "node:timers/promises";
import { and, count, eq, isNull } from "drizzle-orm";
import { withAdvisoryLock } from "@/db/bulk-transaction";
import { ingestPieces } from "@/db/schema";
import { helpUpload } from "@/jobs/definitions/help-upload";
import type { Context } from "@/services/context";
import { claimPiece, outcomeOf, sweepRuns } from "./claim";
import { oneAtATime } from "./one-at-a-time";
import type { PieceKind } from "./piece-kind";
import { memoryPieces, storedPieces, type PieceStore } from "./piece-store";
import { decodeRecord, encodeRecord } from "./records";
import { forget } from "./remembered";

/** Tells how much of a phase is done, 0 to 1; throws where the worker is told to stop. */
export type Tell = (share: number) => Promise<void>;

/** One reading of one file, conducted by this process. */
export interface Run {
  readonly store: PieceStore;
  readonly isShared: boolean;
  /** Does every piece, alone or with others; the outcomes come in the order of the inputs. */
  perform<I, O>(kind: PieceKind<I, O>, inputs: readonly I[], tell: Tell): Promise<O[]>;
}

/** Workers that are asked to help, at most: each that is free takes one seat. */
const SEATS = 16;
const WAIT_MS = 25;
const ROWS_PER_STATEMENT = 1000;

/** Runs that this process conducts: it need not help itself. */
const conducted = new Set<string>();

/**
 * Conducts the reading of a file. A shared one keeps its pieces in the storage and asks other workers for help; it is
 * over when this process is. What it kept is removed in the end, by the next reading at the latest.
 */
export async function withRun<T>(ctx: Context, uploadId: string, isShared: boolean, work: (run: Run) => Promise<T>): Promise<T> {
  return isShared ? conduct(ctx, uploadId, work) : alone(ctx, work);
}

async function alone<T>(ctx: Context, work: (run: Run) => Promise<T>): Promise<T> {
  const store = memoryPieces(randomUUID());
  let phases = 0;
  try {
    return await work({
      store,
      isShared: false,
      async perform(kind, inputs, tell) {
        const phase = phases++;
        const outcomes = [];
        for (const [i, input] of inputs.entries()) {
          const bench = { db: ctx.db, storage: ctx.storage, store, name: `${phase}-${i}`, tell: (share: number) => tell((i + share) / inputs.length) };
          outcomes.push(await oneAtATime(() => kind.work(bench, input)));
          await tell((i + 1) / inputs.length);
        }
        return outcomes;
      },
    });
  } finally {
    forget(store);
    await store.clear();
  }
}

async function conduct<T>(ctx: Context, uploadId: string, work: (run: Run) => Promise<T>): Promise<T> {
  await sweepRuns(ctx);
  const run = randomUUID();
  const store = storedPieces(ctx.storage, run);
  let phases = 0;
  conducted.add(run);
  try {
    return await withAdvisoryLock(ctx.db, run, () =>
      work({
        store,
        isShared: true,
        async perform(kind, inputs, tell) {
          const phase = String(phases++);
          await store.put(phase, [encodeRecord(inputs)]);
          await list(ctx, { run, uploadId, kind: kind.name, inputs: phase }, inputs.length);
          if (phase === "0") await askForHelp(ctx, run);
          await untilDone(ctx, run, inputs.length, tell);
          const outcomes = [];
          for (let i = 0; i < inputs.length; i++) outcomes.push(decodeRecord(await store.read(outcomeOf(phase, i))));
          return outcomes as never;
        },
      }),
    );
  } finally {
    conducted.delete(run);
    forget(store);
    // Where this fails the next reading sweeps; what went wrong before says more.
    await sweepRuns(ctx).catch((error: Error) => console.error("Sweep of pieces:", error.message));
  }
}

async function list(ctx: Context, phase: Omit<typeof ingestPieces.$inferInsert, "number">, pieces: number): Promise<void> {
  for (let from = 0; from < pieces; from += ROWS_PER_STATEMENT) {
    const length = Math.min(ROWS_PER_STATEMENT, pieces - from);
    await ctx.db.insert(ingestPieces).values(Array.from({ length }, (_, i) => ({ ...phase, number: from + i })));
  }
}

async function askForHelp(ctx: Context, run: string): Promise<void> {
  for (let seat = 0; seat < SEATS; seat++) await ctx.queue.enqueue(helpUpload, { run, seat });
}

/** Takes part in the work, then waits for the pieces that others are at. */
async function untilDone(ctx: Context, run: string, pieces: number, tell: Tell): Promise<void> {
  while (pieces > 0) {
    const left = await piecesLeft(ctx, run);
    await tell(1 - left / pieces);
    if (left === 0) return;
    const claim = await oneAtATime(() => claimPiece(ctx, run, (share) => tell(1 - (left - share) / pieces)));
    if (claim === "over") throw new Error("The database has lost this reading's lock; it must begin again.");
    if (claim === "none") await delay(WAIT_MS);
  }
}

async function piecesLeft(ctx: Context, run: string): Promise<number> {
  const [row] = await ctx.db
    .select({ n: count() })
    .from(ingestPieces)
    .where(and(eq(ingestPieces.run, run), isNull(ingestPieces.doneAt)));
  return row.n;
}

/** Takes part in a run that another process conducts, until it is over. */
export async function helpRun(ctx: Context, run: string, signal: AbortSignal | undefined): Promise<void> {
  const tell = async () => signal?.throwIfAborted();
  try {
    for (;;) {
      await tell();
      if (conducted.has(run)) {
        await delay(WAIT_MS);
        continue;
      }
      const claim = await oneAtATime(() => claimPiece(ctx, run, tell));
      if (claim === "over") return;
      if (claim === "none") await delay(WAIT_MS);
    }
  } finally {
    forget(storedPieces(ctx.storage, run));
    await sweepRuns(ctx);
  }
}
