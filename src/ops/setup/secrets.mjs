import { randomBytes } from "node:crypto";
import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";

/** Secrets of this clone, made at its first start and kept where only their owner reads them. */
export function cloneSecrets(dataDir) {
  const path = join(dataDir, "secrets.json");
  if (existsSync(path)) return JSON.parse(readFileSync(path, "utf8"));
  const secrets = { database: randomBytes(18).toString("hex"), session: randomBytes(32).toString("hex") };
  mkdirSync(dataDir, { recursive: true });
  writeFileSync(path, JSON.stringify(secrets), { mode: 0o600 });
  return secrets;
}
