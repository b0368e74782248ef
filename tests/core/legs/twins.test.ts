import { describe, expect, it } from "vitest";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import { dropTwins } from "@/core/legs/twins";

const frame = createFrame([{ id: "A", lat: 45.6, lon: -38.3 }, { id: "B", lat: 45.603, lon: -38.3 }], 1000);
const line = (...xy: number[]): Float64Array => Float64Array.from(xy);

describe("twins", () => {
  const north = draftLeg(frame, 0, line(0, 14, 0, 300), 40);

  it("drops the weaker of two legs that one street gave", () => {
    const crooked = draftLeg(frame, 0, line(-6, 13, 0, 40, 2, 300), 7);
    expect(dropTwins({ legs: [crooked, north], exits: [] }).legs).toEqual([north]);
  });

  it("knows one street of 12 m by the whole of it", () => {
    const short = draftLeg(frame, 0, line(0, 14, 0, 26), 80);
    const beside = draftLeg(frame, 0, line(2, 15, 3, 24), 20);
    expect(dropTwins({ legs: [beside, short], exits: [] }).legs).toEqual([short]);
  });

  it("keeps legs 45 degrees apart, and a frontage road 30 m beside", () => {
    const skewed = draftLeg(frame, 0, line(10, 10, 210, 210), 20);
    const frontage = draftLeg(frame, 0, line(30, 14, 30, 300), 20);
    expect(dropTwins({ legs: [north, skewed, frontage], exits: [] }).legs).toHaveLength(3);
  });

  it("hangs legs on the exit that stays", () => {
    const exit = draftExit(frame, 1, line(0, -14, 0, -300), 30);
    const twin = draftExit(frame, 1, line(3, -14, 1, -300), 5);
    const joined = dropTwins({ legs: [{ ...north, upstreamExit: 0 }], exits: [twin, exit] });
    expect(joined.exits).toEqual([exit]);
    expect(joined.legs[0].upstreamExit).toBe(0);
  });
});
