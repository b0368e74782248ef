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

/** 64 bits of HMAC-SHA-256 over the supplier's identifier, by dense vehicle number. */
export function vehicleHashes(key: Buffer, names: { size: number; nameOf(vehicle: number): string }): BigInt64Array {
  const hashes = new BigInt64Array(names.size);
  for (let v = 0; v < names.size; v++) {
    hashes[v] = createHmac("sha256", key).update(names.nameOf(v)).digest().readBigInt64BE(0);
  }
  return hashes;
}
