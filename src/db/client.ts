import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import { Pool } from "pg";
import * as schema from "./schema";

type Schema = typeof schema;
/** A pool or a transaction: verbs do not care which. */
export type Db = NodePgDatabase<Schema> | Parameters<Parameters<NodePgDatabase<Schema>["transaction"]>[0]>[0];

export interface Database {
  db: NodePgDatabase<Schema> & { $client: Pool };
  pool: Pool;
  close(): Promise<void>;
}

export function openDatabase(url: string, options: { max?: number } = {}): Database {
  const pool = new Pool({ connectionString: url, max: options.max ?? 10 });
  // An idle client that loses its server must not take the process down; the next query reports it.
  pool.on("error", () => undefined);
  // The same for one that is in use between two queries, as in a transaction or while it holds a lock.
  pool.on("connect", (client) => client.on("error", () => undefined));
  return { db: drizzle(pool, { schema }), pool, close: () => pool.end() };
}
