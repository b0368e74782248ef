import { randomUUID } from "node:crypto";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, inject } from "vitest";
import { openDatabase, type Database } from "@/db/client";
import { users } from "@/db/schema";
import type { Actor, Role } from "@/domain/actor";
import { openQueue, type Queue } from "@/jobs/queue";
import type { Mailer, OutgoingMail } from "@/mail/mailer";
import type { Context } from "@/services/context";
import { openFolderStorage } from "@/storage/folder-storage";
import { createDatabase, dropDatabase, urlOf } from "./databases";

interface Place {
  url: string;
  database: Database;
  queue: Queue;
  folder: string;
}

let place: Promise<Place> | undefined;

/** Database and folder of this test file alone, made when first asked for. */
export function testPlace(): Promise<Place> {
  place ??= openPlace();
  return place;
}

async function openPlace(): Promise<Place> {
  const templateUrl = inject("templateUrl");
  const name = `tailmark_${randomUUID().replaceAll("-", "")}`;
  await createDatabase(templateUrl, name, "tailmark_template");
  const url = urlOf(templateUrl, name);
  const database = openDatabase(url, { max: 5 });
  return { url, database, queue: openQueue(database.db), folder: await mkdtemp(join(tmpdir(), "tailmark-files-")) };
}

afterAll(async () => {
  if (!place) return;
  const { url, database, queue, folder } = await place;
  place = undefined;
  await queue.stop();
  await database.close();
  await dropDatabase(url, new URL(url).pathname.slice(1));
  await rm(folder, { recursive: true, force: true });
});

export interface TestContext extends Context {
  db: Database["db"];
  /** What was sent, in order. */
  sent: OutgoingMail[];
}

export const TEST_NOW = new Date("2026-03-10T12:00:00Z");

/** A context for a verb: a person of the role, the worker (`job`) or someone signed out (`nobody`). */
export async function testContext(as: Role | "job" | "nobody", overrides: Partial<Context> = {}): Promise<TestContext> {
  const { database, queue, folder } = await testPlace();
  const sent: OutgoingMail[] = [];
  const mailer: Mailer = {
    send: async (mail) => void sent.push(mail),
    listKept: async () => [],
    close: () => undefined,
  };
  return {
    actor: await actorFor(database.db, as),
    now: TEST_NOW,
    storage: openFolderStorage(folder),
    queue,
    mailer,
    baseUrl: "http://city.example",
    ...overrides,
    db: database.db,
    sent,
  };
}

async function actorFor(db: Database["db"], as: Role | "job" | "nobody"): Promise<Actor> {
  if (as === "nobody") return { type: "nobody" };
  if (as === "job") return { type: "job", job: "test" };
  const person = { name: `Test ${as}`, email: `${as}-${randomUUID().slice(0, 8)}@test.example`, role: as };
  const [row] = await db.insert(users).values({ ...person, sessionsValidFrom: TEST_NOW }).returning({ userId: users.id });
  return { type: "user", userId: row.userId, ...person };
}
