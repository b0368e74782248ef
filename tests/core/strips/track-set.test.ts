import { describe, expect, it } from "vitest";
import { encodeTrack } from "@/core/strips/track-codec";
import { decodeTrackSet, encodeTrackSet, type StoredTrack } from "@/core/strips/track-set";

const stored = (day: number, enterS: number, movement: number, delayS: number, t: number[], s: number[]): StoredTrack => ({
  day,
  enterS,
  movement,
  delayS,
  track: encodeTrack(Float32Array.from(t), Float32Array.from(s)),
});

const late = stored(20_531, 61_200, 7, 12.5, [-4, 0, 30], [300, 250, -20]);
const early = stored(20_530, 86_390, 9, -1, [0, 20], [250, 0]);

describe("track set", () => {
  it("puts tracks in order of their day, with times after that day's midnight", () => {
    const set = decodeTrackSet(encodeTrackSet([late, early]).buffer);
    expect(set.tracks).toBe(2);
    expect([...set.day]).toEqual([20_530, 20_531]);
    expect([...set.movement]).toEqual([9, 7]);
    expect([...set.delayS]).toEqual([-1, 12.5]);
    expect([...set.offset]).toEqual([0, 2, 5]);
    // The early one runs past midnight and keeps counting.
    expect([...set.tS]).toEqual([86_390, 86_410, 61_196, 61_200, 61_230]);
    expect([...set.sM]).toEqual([250, 0, 300, 250, -20]);
  });

  it("looks into the buffer instead of copying it", () => {
    const buffer = encodeTrackSet([late]).buffer;
    expect(decodeTrackSet(buffer).sM.buffer).toBe(buffer);
  });

  it("carries no track at all", () => {
    const set = decodeTrackSet(encodeTrackSet([]).buffer);
    expect(set.tracks).toBe(0);
    expect([...set.offset]).toEqual([0]);
  });

  it("refuses foreign and cut bytes", () => {
    const bytes = encodeTrackSet([late]);
    expect(() => decodeTrackSet(bytes.slice(0, -4).buffer)).toThrow(TypeError);
    expect(() => decodeTrackSet(new ArrayBuffer(8))).toThrow("too few bytes");
    expect(() => decodeTrackSet(new ArrayBuffer(64))).toThrow("Not a track set.");
    const other = bytes.slice();
    new Uint32Array(other.buffer)[1] = 2;
    expect(() => decodeTrackSet(other.buffer)).toThrow("version 2, expected 1");
  });
});
