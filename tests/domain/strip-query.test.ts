import { describe, expect, it } from "vitest";
import { stripQueryFromParams, stripQueryToParams, whenQueryFromParams, whenQueryToParams } from "@/domain/query-address";

describe("strip query in the address", () => {
  it("is the default view when the address says nothing", () => {
    const query = stripQueryFromParams({});
    expect(query).toMatchObject({ period: "pm", days: "weekdays", turn: "any", shape: "waves", wave: 15, cellM: 10, cellS: 120, smooth: "off", paths: "hidden" });
    expect(stripQueryToParams(query).toString()).toBe("");
  });

  it("comes back from the address as it went in", () => {
    const params = { day: "2026-03-11", shape: "rectangles", wave: "18", cellM: "5", cellS: "30", paths: "shown", from: "420", to: "600" };
    const query = stripQueryFromParams(params);
    expect(stripQueryFromParams(Object.fromEntries(stripQueryToParams(query)))).toEqual(query);
    expect(Object.fromEntries(stripQueryToParams(query))).toEqual(params);
  });

  it("drops only the fields that cannot be read", () => {
    const query = stripQueryFromParams({ wave: "25", day: "11 March", cellM: "20", shape: ["rectangles", "waves"] });
    expect(query).toMatchObject({ wave: 15, cellM: 20, shape: "rectangles" });
    expect(query.day).toBeUndefined();
  });

  it("ignores half a window and a window that ends before it begins", () => {
    expect(stripQueryFromParams({ from: "420" }).from).toBeUndefined();
    expect(whenQueryFromParams({ from: "600", to: "420" })).toMatchObject({ from: undefined, to: undefined });
  });

  it("takes only the part that says when from a wider query", () => {
    expect(whenQueryToParams(stripQueryFromParams({ period: "am", wave: "18" })).toString()).toBe("period=am");
  });
});
