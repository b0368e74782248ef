import { describe, expect, it } from "vitest";
import { benchArguments } from "@/ops/bench/bench-arguments";
import { figure, figuresTable, p95 } from "@/ops/bench/figures";

describe("a figure of the bench", () => {
  it("has the ratio to what was measured beside it, in the same unit", () => {
    expect(figure("ingest", 3, "s", "bare COPY", 6)).toEqual({ name: "ingest", value: 3, unit: "s", against: "bare COPY: 6 s", ratio: 0.5 });
  });

  it("is a row of the table", () => {
    expect(figuresTable([figure("ingest", 3, "s", "bare COPY", 6)], "10 pings")).toContain("| ingest | 3 s | bare COPY: 6 s | 0.5 |");
  });
});

describe("p95", () => {
  it("is the smallest value that 95 of 100 do not exceed", () => {
    expect(p95(Array.from({ length: 100 }, (_, i) => 100 - i))).toBe(95);
  });

  it("of one value is that value", () => {
    expect(p95([7])).toBe(7);
  });
});

describe("arguments of the bench", () => {
  it("take all parts where none is named, and keep their order", () => {
    expect(benchArguments([])).toMatchObject({ parts: ["parse", "ingest", "workers", "ranking", "strip", "browser", "crowd"], rows: 1_000_000, seconds: 60, isWrite: false });
    expect(benchArguments(["--only", "strip", "--only", "parse"])).toMatchObject({ parts: ["parse", "strip"] });
  });

  it("refuse what makes no sense in a sentence", () => {
    expect(() => benchArguments(["--only", "speed"])).toThrow("--only speed is no part of the bench");
    expect(() => benchArguments(["--rows", "1.5"])).toThrow("--rows 1.5 is no whole number");
    expect(() => benchArguments(["--write", "--only", "parse"])).toThrow("leave --only out");
  });
});
