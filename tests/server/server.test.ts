import { describe, expect, it } from "vitest";
import { z } from "zod";
import { AppError, notFound } from "@/domain/errors";
import { addressFrom } from "@/server/client-address";
import { toProblem } from "@/server/problem";
import { requireSameOrigin } from "@/server/same-origin";
import { expectLoggedErrors } from "@tests/support/setup";

describe("a request that changes something", () => {
  const ask = (method: string, headers: Record<string, string>) =>
    requireSameOrigin(new Request("http://127.0.0.1:3000/api/uploads", { method, headers: { host: "127.0.0.1:3000", ...headers } }));

  it("may come from our own pages, or from no page at all", () => {
    expect(() => ask("POST", { origin: "http://127.0.0.1:3000", "sec-fetch-site": "same-origin" })).not.toThrow();
    expect(() => ask("POST", { origin: "http://127.0.0.1:3000" })).not.toThrow();
    expect(() => ask("POST", {})).not.toThrow();
  });

  it.each([
    ["another site", { origin: "http://elsewhere.example" }],
    ["another port", { origin: "http://127.0.0.1:3001" }],
    ["a page without an origin", { origin: "null" }],
    ["a neighbouring site", { "sec-fetch-site": "same-site" }],
    ["another site, by the browser's word", { "sec-fetch-site": "cross-site", origin: "http://127.0.0.1:3000" }],
  ])("is refused from %s", (_name, headers) => {
    for (const method of ["POST", "PUT", "PATCH", "DELETE"]) expect(() => ask(method, headers)).toThrow("came from another site");
    expect(() => ask("GET", headers)).not.toThrow();
  });
});

describe("the address of a client", () => {
  const claimed = { forwardedFor: "6.6.6.6, 10.0.0.7", peer: "10.0.0.1" };

  it.each([
    [0, "10.0.0.1"],
    [1, "10.0.0.7"],
    [2, "6.6.6.6"],
    [5, "6.6.6.6"],
  ])("with %d trusted proxies is %s, whatever stands left of it", (proxies, address) => {
    expect(addressFrom(claimed, proxies)).toBe(address);
  });

  it("is the connection's where nothing was forwarded, and one for all where nobody knows", () => {
    expect(addressFrom({ forwardedFor: undefined, peer: "10.0.0.1" }, 1)).toBe("10.0.0.1");
    expect(addressFrom({ forwardedFor: undefined, peer: undefined }, 0)).toBe("unknown");
  });
});

describe("a problem", () => {
  it("passes on the sentences that are meant for people", () => {
    expect(toProblem(notFound("Upload", 7))).toEqual({ code: "not_found", message: "Upload 7 does not exist." });
    const conflict = new AppError("conflict", "Taken.", { fieldErrors: { email: ["Taken."] } });
    expect(toProblem(conflict)).toEqual({ code: "conflict", message: "Taken.", fieldErrors: { email: ["Taken."] } });
  });

  it("puts what is wrong with a form at its fields", () => {
    const result = z.object({ name: z.string().min(1, { message: "Give a name." }) }).safeParse({ name: "" });
    expect(toProblem(result.error)).toEqual({ code: "invalid", message: "Check name: Give a name.", fieldErrors: { name: ["Give a name."] } });
  });

  it("hides what was not meant for people behind a reference that the log explains", () => {
    const logged = expectLoggedErrors();
    const problem = toProblem(new Error('relation "users" does not exist'));
    expect(problem.code).toBe("internal");
    const reference = /^Something went wrong\. Reference ([0-9a-f]{8})\.$/.exec(problem.message)?.[1];
    expect(reference).toBeDefined();
    expect(logged[0][0]).toBe(`Reference ${reference}:`);
    expect(String(logged[0][1])).toContain('relation "users"');
  });
});
