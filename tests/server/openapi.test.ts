import { describe, expect, it } from "vitest";
import { FeedPing } from "@/domain/feed";
import { STATUS_OF_CODE } from "@/server/problem";
import { openApiDocument } from "@/server/openapi";

const document = JSON.parse(JSON.stringify(openApiDocument("https://tailmark.city.example"))) as ReturnType<typeof openApiDocument>;
const post = document.paths["/api/v1/pings"].post;

function* valuesOf(node: unknown, name: string): Generator<unknown> {
  if (typeof node !== "object" || node === null) return;
  for (const [key, value] of Object.entries(node)) {
    if (key === name) yield value;
    yield* valuesOf(value, name);
  }
}

function resolve(ref: string): unknown {
  return ref.slice(2).split("/").reduce<unknown>((node, part) => (node as Record<string, unknown> | undefined)?.[part], document);
}

describe("the description of the feed", () => {
  it("has what OpenAPI 3.1 asks for", () => {
    expect(document.openapi).toBe("3.1.0");
    expect(document.info).toMatchObject({ title: expect.any(String), version: expect.stringMatching(/^\d+\.\d+\.\d+$/) });
    expect(Object.keys(document.paths).every((path) => path.startsWith("/"))).toBe(true);
    for (const [status, response] of Object.entries(post.responses)) {
      expect(status).toMatch(/^[1-5]\d\d$/);
      expect(response.description).not.toBe("");
    }
    expect(post.security.flatMap((need) => Object.keys(need)).every((name) => name in document.components.securitySchemes)).toBe(true);
    for (const parameter of post.parameters) expect(parameter).toMatchObject({ name: expect.any(String), in: "header", schema: { type: "string" } });
  });

  it("refers only to schemas that it holds", () => {
    const refs = [...valuesOf(document, "$ref")].map(String);
    expect(refs.length).toBeGreaterThan(5);
    expect(refs.filter((ref) => resolve(ref) === undefined)).toEqual([]);
  });

  it("carries the schemas by which batches are checked, without a dialect of their own", () => {
    const { Ping, Receipt, Problem } = document.components.schemas;
    expect(Ping).toMatchObject({ type: "object", required: ["vehicle_id", "timestamp", "lat", "lon"] });
    expect(Object.keys(Ping.properties as object)).toEqual(Object.keys(FeedPing.shape));
    expect(Receipt.required).toEqual(["batch", "accepted", "rejected", "repeated", "reasons", "samples"]);
    for (const schema of [Ping, Receipt, Problem]) expect(schema).not.toHaveProperty("$schema");
  });

  it("gives examples that the reader takes", () => {
    const lines = post.requestBody.content["application/x-ndjson"].example.split("\n");
    for (const line of lines) expect(FeedPing.safeParse(JSON.parse(line)).success).toBe(true);
  });

  it("names the statuses that the application answers with", () => {
    const known = new Set(["200", "202", ...Object.values(STATUS_OF_CODE).map(String)]);
    expect(Object.keys(post.responses).filter((status) => !known.has(status))).toEqual([]);
  });
});
