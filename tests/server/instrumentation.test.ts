import { createServer, request } from "node:http";
import type { AddressInfo } from "node:net";
import { expect, it, vi } from "vitest";
import { register } from "@/instrumentation";
import { PEER_HEADER } from "@/server/peer-header";

it("tells routes the connection's address, and not what the client claims it to be", async () => {
  vi.stubEnv("NEXT_RUNTIME", "nodejs");
  await register();
  const server = createServer((asked, answer) => answer.end(String(asked.headers[PEER_HEADER])));
  await new Promise<void>((listening) => server.listen(0, "127.0.0.1", listening));
  try {
    const { port } = server.address() as AddressInfo;
    const seen = await new Promise<string>((resolve, reject) => {
      const asking = request({ port, host: "127.0.0.1", headers: { [PEER_HEADER]: "6.6.6.6" } }, (answer) => {
        let text = "";
        answer.on("data", (part) => (text += part)).on("end", () => resolve(text));
      });
      asking.on("error", reject).end();
    });
    expect(seen).toBe("127.0.0.1");
  } finally {
    server.close();
    vi.unstubAllEnvs();
  }
});
