import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { z } from "zod";
import { StripQuery, WhenQuery } from "@/domain/junction";
import { screenQueryFromParams, screenQueryToParams, stripQueryFromParams, stripQueryToParams, USUAL_SCREEN, USUAL_STRIP, whenQueryFromParams } from "@/domain/query-address";
import { ScreenQuery } from "@/domain/screen";

/** What people, and other programs, put into an address. */
const TEXTS = fc.oneof(
  fc.constantFrom("pm", "all", "every", "weekdays", "left", "any", "fair", "none", "rank", "name", "desc", "asc", "waves", "on", "off", "shown", ""),
  fc.constantFrom("0", "15", "20", "420", "421", "600", "601", "1440", "1455", "-15", "2.5", "1e2", " 30 ", "NaN", "Infinity", "9007199254740993", "0x1E"),
  fc.constantFrom("2026-03-01", "2026-02-29", "2024-02-29", "2026-13-01", "2026-3-1", "03/01/2026", "0000-01-01"),
  fc.constantFrom("Quay Street", "  Quay  ", "q".repeat(80), "q".repeat(81), ` ${"q".repeat(80)} `),
  fc.string(),
);

/** The rule by the schema: fields that it refuses are left out, half a window is none. */
function bySchema<T extends z.ZodType>(schema: T, params: Record<string, string>): z.infer<T> {
  const left = { ...params };
  const strict = schema.safeParse(left);
  if (!strict.success) for (const issue of strict.error.issues) delete left[String(issue.path[0])];
  const query = schema.parse(left) as { from?: number; to?: number };
  const isWhole = query.from !== undefined && query.to !== undefined && query.from < query.to;
  return (isWhole ? query : { ...query, from: undefined, to: undefined }) as z.infer<T>;
}

function params(schema: { shape: object }) {
  return fc.record(Object.fromEntries(Object.keys(schema.shape).map((key) => [key, TEXTS])), { requiredKeys: [] }) as fc.Arbitrary<Record<string, string>>;
}

describe("queries in an address", () => {
  it("are read as their schemas read them", () => {
    const agree = <T extends z.ZodType & { shape: object }>(read: (given: Record<string, string>) => unknown, schema: T) =>
      fc.property(params(schema), (given) => {
        expect(read(given)).toEqual(bySchema(schema, given));
      });
    fc.assert(agree(screenQueryFromParams, ScreenQuery), { numRuns: 2000 });
    fc.assert(agree(whenQueryFromParams, WhenQuery), { numRuns: 500 });
    fc.assert(agree(stripQueryFromParams, StripQuery), { numRuns: 2000 });
  });

  it("come back from the address as they went in", () => {
    fc.assert(
      fc.property(params(ScreenQuery), (given) => {
        const query = screenQueryFromParams(given);
        expect(screenQueryFromParams(Object.fromEntries(screenQueryToParams(query)))).toEqual(query);
      }),
    );
    fc.assert(
      fc.property(params(StripQuery), (given) => {
        const query = stripQueryFromParams(given);
        expect(stripQueryFromParams(Object.fromEntries(stripQueryToParams(query)))).toEqual(query);
      }),
    );
  });

  it("have the usual values of their schemas", () => {
    expect(USUAL_SCREEN).toEqual(ScreenQuery.parse({}));
    expect(USUAL_STRIP).toEqual(StripQuery.parse({}));
    expect(screenQueryToParams(USUAL_SCREEN).toString()).toBe("");
    expect(screenQueryToParams(screenQueryFromParams({ q: "Quay", sort: ["delay", "rank"], minDelay: "35" })).toString()).toBe("minDelay=35&q=Quay&sort=delay");
  });
});
