import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { Client } from "pg";
import { openDatabase, type Database } from "@/db/client";
import { openQueue } from "@/jobs/queue";
import type { Context } from "@/services/context";
import { openFolderStorage } from "@/storage/folder-storage";
import { migrateDatabase } from "../migrate-database";
import { startPostgres } from "../setup/postgres-server.mjs";

const PARENT = "/var/tmp";

/** A folder and a database server of the bench's own, with fsync on as a city's has it. */
export interface BenchPlace {
  folder: string;
  /** A new database with the tables of the product, and its address. */
  newDatabase(name: string): Promise<string>;
  close(): Promise<void>;
}

export async function openPlace(): Promise<BenchPlace> {
  const folder = mkdtempSync(join(PARENT, `tailmark-bench-${process.pid}-`));
  // The account that the server runs under passes through it.
  chmodSync(folder, 0o711);
  const server = await startPostgres({ wanted: join(folder, "postgres"), password: "bench" });
  return {
    folder,
    async newDatabase(name) {
      await onServer(server.url, `create database "${name}"`);
      const url = new URL(server.url);
      url.pathname = `/${name}`;
      await migrateDatabase(url.toString(), "drizzle");
      return url.toString();
    },
    async close() {
      await server.stop();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

async function onServer(url: string, statement: string): Promise<void> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}

export interface OpenContext {
  ctx: Context;
  database: Database;
  close(): Promise<void>;
}

/** A worker's context on a database and a folder of stored files; its mail goes nowhere. */
export function openContext(url: string, folder: string): OpenContext {
  const database = openDatabase(url, { max: 20 });
  const queue = openQueue(database.db);
  const ctx: Context = {
    actor: { type: "job", job: "bench" },
    db: database.db,
    now: new Date(),
    storage: openFolderStorage(join(folder, "storage")),
    queue,
    mailer: { send: async () => undefined, listKept: async () => [], close: () => undefined },
    baseUrl: "http://bench.example",
  };
  return {
    ctx,
    database,
    async close() {
      await queue.stop();
      await database.close();
    },
  };
}
