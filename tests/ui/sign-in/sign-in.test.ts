import { describe, expect, it } from "vitest";
import { localPath } from "@/ui/sign-in/local-path";
import { drawQueue } from "@/ui/sign-in/queue-paths";

describe("the address to come back to", () => {
  it.each(["/screen?period=am", "/legs/12", "/"])("may be %s", (path) => {
    expect(localPath(path)).toBe(path);
  });

  it.each([undefined, "", "screen", "//elsewhere.example", "/\\elsewhere.example", "https://elsewhere.example", "/a\\b", "/a\nb", "/sign-in?next=/"])("is the start page instead of %j", (path) => {
    expect(localPath(path)).toBe("/");
  });
});

describe("the drawing of a queue", () => {
  const { paths, tail, red } = drawQueue(2, 150);

  it("lets nobody drive backwards in time or away from the stop line", () => {
    for (const path of paths) {
      for (let i = 1; i < path.length; i++) {
        expect(path[i].tS).toBeGreaterThanOrEqual(path[i - 1].tS);
        expect(path[i].sM).toBeLessThanOrEqual(path[i - 1].sM);
      }
    }
  });

  it("lets nobody pass the stop line at red", () => {
    for (const path of paths) {
      const crossingS = path[path.length - 1].tS;
      expect(red.some(({ fromS, toS }) => crossingS > fromS && crossingS < toS)).toBe(false);
    }
  });

  it("has the tail grow by one vehicle's room at a time", () => {
    for (const stands of tail) expect(stands.map(({ sM }) => sM)).toEqual(stands.map((_, i) => i * 7.5));
  });
});
