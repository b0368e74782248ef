import { describe, expect, it } from "vitest";
import { createStrip, specOfWindow } from "@/core/strips/strip";
import { cellPixels } from "@/ui/strips/draw-cells";

describe("pixels of a strip's cells", () => {
  it("stand with the farthest row first, from the stopped to the free end of the ramp, clear where nobody was seen", () => {
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 120, bottomM: 0, topM: 20 }, 60, 10, Infinity));
    expect([strip.spec.columns, strip.spec.rows]).toEqual([2, 2]);
    // Rows from the stop line upstream: stopped and unseen, then free and faster than free.
    const pixels = cellPixels({ strip, speeds: Float32Array.of(0, NaN, 10, 14), freeMs: 10 });
    const free = [0xfb, 0xef, 0xd2, 255];
    expect([...pixels]).toEqual([...free, ...free, 0x2d, 0x0b, 0x3f, 255, 0, 0, 0, 0]);
  });
});
