import { PEER_HEADER } from "@/server/peer-header";

interface StartedRequest {
  request: { headers: Record<string, unknown>; socket: { remoteAddress?: string } };
}

/** Routes see headers only: the connection's own address is put among them before the request is handled. The first screen is made ready. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === "nodejs") {
    const { subscribe } = await import("node:diagnostics_channel");
    subscribe("http.server.request.start", (message) => {
      const { request } = message as StartedRequest;
      request.headers[PEER_HEADER] = request.socket.remoteAddress ?? "";
    });
    if (process.env.NEXT_PHASE !== "phase-production-build") {
      const { warmUp } = await import("@/server/warm-up");
      void warmUp();
    }
  }
}
