import { hash, verify } from "@node-rs/argon2";

// OWASP's recommendation for argon2id: 19 MiB, two passes, one lane.
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

let decoy: Promise<string> | undefined;

/** Takes the same time where there is no account or no password yet, so that the answer's delay tells nothing. */
export async function passwordMatches(passwordHash: string | null | undefined, password: string): Promise<boolean> {
  decoy ??= hashPassword("no account has this password");
  const matches = await verify(passwordHash ?? (await decoy), password);
  return matches && Boolean(passwordHash);
}
