import { headers } from "next/headers";
import { env } from "@/env";
import { PEER_HEADER } from "./peer-header";

interface Route {
  forwardedFor: string | null | undefined;
  /** Address of the connection's other end. */
  peer: string | null | undefined;
}

/**
 * Every server on the way adds the address that it was called from; what stands left of the trusted ones' entries
 * is the client's claim. Without a proxy in front it is the connection's address.
 */
export function addressFrom({ forwardedFor, peer }: Route, trustedProxies: number): string {
  const claimed = forwardedFor?.split(",").map((entry) => entry.trim()) ?? [];
  const hops = [...claimed, peer ?? ""].filter((entry) => entry !== "");
  return hops[Math.max(0, hops.length - 1 - trustedProxies)] ?? "unknown";
}

export async function clientAddress(): Promise<string> {
  const all = await headers();
  return addressFrom({ forwardedFor: all.get("x-forwarded-for"), peer: all.get(PEER_HEADER) }, env().TRUSTED_PROXIES);
}
