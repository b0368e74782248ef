import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { decodeTrack, encodeTrack, trackLength } from "@/core/strips/track-codec";

const f32 = (...values: number[]) => new Float32Array(values);

describe("track codec", () => {
  it("writes the bytes of its description", () => {
    // Version 1, 2 points; t 5.0 s zigzag(50) = 100; s 20.0 m zigzag(200) = 400 = 16 + 3 * 128; then +1.0 s and -6.0 m: zigzag(-60) = 119.
    expect([...encodeTrack(f32(5, 6), f32(20, 14))]).toEqual([1, 2, 100, 144, 3, 10, 119]);
  });

  it("keeps negative times, standing pieces and positions past the stop line", () => {
    const t = f32(-30.5, -10, 0, 60, 75.3);
    const s = f32(480, 260.4, 250, 250, -40.2);
    const back = decodeTrack(encodeTrack(t, s));
    expect([...back.t]).toEqual([...t]);
    expect([...back.s]).toEqual([...s]);
  });

  it("reads an empty track", () => {
    expect(decodeTrack(encodeTrack(f32(), f32())).t.length).toBe(0);
  });

  it("stays within half a step of any track, however long", () => {
    const steps = fc.array(fc.tuple(fc.float({ min: 0, max: 400, noNaN: true }), fc.float({ min: -500, max: 2000, noNaN: true })), { maxLength: 60 });
    fc.assert(
      fc.property(steps, (points) => {
        const t = Float32Array.from(points.map((p) => p[0])).sort();
        const s = Float32Array.from(points.map((p) => p[1]));
        const bytes = encodeTrack(t, s);
        const back = decodeTrack(bytes);
        expect(trackLength(bytes)).toBe(t.length);
        t.forEach((value, i) => expect(Math.abs(back.t[i] - value)).toBeLessThan(0.0502));
        s.forEach((value, i) => expect(Math.abs(back.s[i] - value)).toBeLessThan(0.0502));
      }),
    );
  });

  it("takes about three bytes a point at five-second pings", () => {
    const t = Float32Array.from({ length: 40 }, (_, i) => i * 5);
    const s = Float32Array.from({ length: 40 }, (_, i) => 480 - Math.min(i, 9) * 50);
    expect(encodeTrack(t, s).length).toBeLessThan(2 + 40 * 3);
  });

  it("refuses what it cannot store", () => {
    expect(() => encodeTrack(f32(0, 1), f32(0))).toThrow(RangeError);
    expect(() => encodeTrack(f32(0, NaN), f32(0, 1))).toThrow(RangeError);
    expect(() => encodeTrack(f32(5, 4), f32(0, 1))).toThrow("backwards at point 1");
    expect(() => encodeTrack(f32(0), f32(Infinity))).toThrow(RangeError);
  });

  it("refuses foreign, cut and overlong bytes", () => {
    const bytes = encodeTrack(f32(0, 5), f32(100, 40));
    expect(() => decodeTrack(Uint8Array.of(9, 0))).toThrow("version 9");
    expect(() => decodeTrack(bytes.slice(0, -1))).toThrow(TypeError);
    expect(() => decodeTrack(Uint8Array.of(...bytes, 0))).toThrow(TypeError);
    expect(() => decodeTrack(new Uint8Array(0))).toThrow(TypeError);
    expect(() => decodeTrack(Uint8Array.of(1, 255, 255, 255, 255, 255))).toThrow(TypeError);
  });
});
