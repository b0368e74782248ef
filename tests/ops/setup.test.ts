import { mkdtempSync, rmSync, statSync } from "node:fs";
import { createServer, type Server } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { freePortFrom } from "@/ops/setup/ports.mjs";
import { run } from "@/ops/setup/run.mjs";
import { cloneSecrets } from "@/ops/setup/secrets.mjs";

describe("the port", () => {
  let taken: Server;
  beforeEach(() => new Promise<void>((resolve) => {
    taken = createServer().listen(0, "127.0.0.1", () => resolve());
  }));
  afterEach(() => new Promise((resolve) => taken.close(resolve)));

  it("is the next one where the wanted one is taken", async () => {
    const address = taken.address();
    if (address === null || typeof address === "string") throw new Error("No port.");
    const port = await freePortFrom(address.port);
    expect(port).toBeGreaterThan(address.port);
    expect(port).toBeLessThan(address.port + 50);
  });
});

describe("a command of the set-up", () => {
  it("answers its lines, and reads what it is given", async () => {
    expect(await run("cat", [], { input: "one\ntwo\n" })).toEqual(["one", "two"]);
  });

  it("fails with what it said last", async () => {
    await expect(run("sh", ["-c", "echo first; echo the reason >&2; exit 3"])).rejects.toThrow(/sh -c failed \(code 3\)\.\n[\s\S]*the reason/);
  });

  it("that does not exist is named", async () => {
    await expect(run("no-such-program", [])).rejects.toThrow("no-such-program cannot be run");
  });
});

describe("the secrets of a clone", () => {
  const folder = mkdtempSync(join(tmpdir(), "tailmark-secrets-"));
  afterEach(() => rmSync(folder, { recursive: true, force: true }));

  it("are made once, long, and readable by their owner alone", () => {
    const first = cloneSecrets(folder);
    expect(cloneSecrets(folder)).toEqual(first);
    expect(first.session.length).toBeGreaterThanOrEqual(64);
    expect(first.database.length).toBeGreaterThanOrEqual(36);
    expect(statSync(join(folder, "secrets.json")).mode & 0o777).toBe(0o600);
  });
});
