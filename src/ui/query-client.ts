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
  return (await fetchGood(path, "application/json", signal)).json() as Promise<T>;
}

/** GET of a route that answers with bytes; throws as `getJson`. */
export async function getBytes(path: string, signal?: AbortSignal): Promise<ArrayBuffer> {
  return (await fetchGood(path, "application/octet-stream, application/json", signal)).arrayBuffer();
}

async function fetchGood(path: string, accept: string, signal?: AbortSignal): Promise<Response> {
  const response = await fetchOrSay(path, accept, signal);
  if (response.ok) return response;
  const problem = (await response.json().catch(() => null)) as { message?: string } | null;
  throw new RequestError(response.status, problem?.message ?? `The server answered ${response.status}.`);
}

async function fetchOrSay(path: string, accept: string, signal?: AbortSignal): Promise<Response> {
  try {
    return await fetch(path, { signal, headers: { accept } });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new RequestError(0, "The server cannot be reached. Check the connection and try again.");
  }
}
