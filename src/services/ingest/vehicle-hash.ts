import { createHmac, randomBytes } from "node:crypto";
import { eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { settings } from "@/db/schema";

const KEY = "vehicle_key";

/** The installation's own secret, made on first use: without it a stored hash leads back to no vehicle. */
export async function vehicleKey(db: Db): Promise<Buffer> {
  await db.insert(settings).values({ key: KEY, value: randomBytes(32).toString("hex") }).onConflictDoNothing();
  const [row] = await db.select({ value: settings.value }).from(settings).where(eq(settings.key, KEY));
  return Buffer.from(String(row.value), "hex");
}

/** 64 bits of HMAC-SHA-256 over the supplier's identifiers, by dense vehicle number; each is hashed once, as names come up. */
export function createHasher(key: Buffer, names: { size: number; nameOf(vehicle: number): string }): () => BigInt64Array {
  let hashes = new BigInt64Array(0);
  let known = 0;
  return () => {
    if (names.size > hashes.length) {
      const larger = new BigInt64Array(Math.max(names.size, hashes.length * 2));
      larger.set(hashes);
      hashes = larger;
    }
    for (; known < names.size; known++) {
      hashes[known] = createHmac("sha256", key).update(names.nameOf(known)).digest().readBigInt64BE(0);
    }
    return hashes.subarray(0, known);
  };
}
