import { isServer, QueryClient } from "@tanstack/react-query";

/** Refusals do not change by asking again; only failures of the server or the line do. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 60_000,
        refetchOnWindowFocus: false,
        retry: (attempts, error) => attempts < 2 && !(error instanceof RequestError && error.status < 500),
      },
    },
  });
}

let ofBrowser: QueryClient | undefined;

/** One client for the life of a tab, a fresh one for each server render. */
export function browserQueryClient(): QueryClient {
  if (isServer) return makeQueryClient();
  ofBrowser ??= makeQueryClient();
  return ofBrowser;
}

/** A request that the server answered with a problem, or that did not reach it (status 0). */
export class RequestError extends Error {
  constructor(
    readonly status: number,
    message: string,
  ) {
    super(message);
    this.name = "RequestError";
  }
}

/** GET of a JSON route; throws `RequestError` with the server's own sentence. */
export async function getJson<T>(path: string, signal?: AbortSignal): Promise<T> {
  const response = await fetchOrSay(path, signal);
  if (response.ok) return (await response.json()) as T;
  const problem = (await response.json().catch(() => null)) as { message?: string } | null;
  throw new RequestError(response.status, problem?.message ?? `The server answered ${response.status}.`);
}

async function fetchOrSay(path: string, signal?: AbortSignal): Promise<Response> {
  try {
    return await fetch(path, { signal, headers: { accept: "application/json" } });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new RequestError(0, "The server cannot be reached. Check the connection and try again.");
  }
}
