import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { delayCode, delayOfCode, delayTicks, reachCode, reachOfCode, secondsCode, secondsOfCode } from "@/core/scores/stored-figures";

describe("a stored delay", () => {
  it.each([
    ["none", 0, 0],
    ["a whole second", 12, 12],
    ["a 64th", 1 / 64, 1 / 64],
    ["less than a 128th of a second from a step", 10.007, 10],
    ["before the reference", -3.5, -3.5],
    ["at the end of the fine steps", 703.984375, 703.984375],
    ["at the first coarse step", 704, 704],
    ["between coarse steps", 1000.1, 1000],
    ["longer than can be kept", 1e6, 4799.75],
    ["less than can be kept", -1000, -64],
  ])("of %s", (_, delayS, kept) => expect(delayOfCode(delayCode(delayS))).toBe(kept));

  it("is off by at most 1/128 s below 704 s and 1/8 s above", () => {
    fc.assert(
      fc.property(fc.double({ min: -64, max: 4799, noNaN: true }), (delayS) => {
        expect(Math.abs(delayOfCode(delayCode(delayS)) - delayS)).toBeLessThanOrEqual(delayS < 703.99 ? 1 / 128 : 1 / 8);
      }),
    );
  });

  it("ascends with its code", () => {
    for (let code = 1; code <= 65_535; code++) if (delayTicks(code) <= delayTicks(code - 1)) expect.fail(`Code ${code} does not ascend.`);
  });

  it("must be known", () => expect(() => delayCode(NaN)).toThrow("A traversal without a delay cannot be kept."));
});

describe("stored metres and seconds of a leg", () => {
  it("know what the sample cannot say", () => {
    expect([reachCode(NaN), secondsCode(NaN)]).toEqual([0, 0]);
    expect([reachOfCode(0), secondsOfCode(0)]).toEqual([NaN, NaN]);
    expect([reachCode(0), secondsCode(0)]).toEqual([1, 1]);
  });

  it("are off by at most 1/16 m and 1/64 s", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 8000, noNaN: true }), fc.double({ min: 0, max: 1800, noNaN: true }), (metres, seconds) => {
        expect(Math.abs(reachOfCode(reachCode(metres)) - metres)).toBeLessThanOrEqual(1 / 16);
        expect(Math.abs(secondsOfCode(secondsCode(seconds)) - seconds)).toBeLessThanOrEqual(1 / 64);
      }),
    );
  });
});
