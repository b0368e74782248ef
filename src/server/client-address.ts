import { headers } from "next/headers";

/** The last entry is the one that the nearest server wrote; earlier ones are what the client claims. */
export function addressFrom(forwardedFor: string | null | undefined): string {
  return forwardedFor?.split(",").at(-1)?.trim() || "unknown";
}

export async function clientAddress(): Promise<string> {
  return addressFrom((await headers()).get("x-forwarded-for"));
}
