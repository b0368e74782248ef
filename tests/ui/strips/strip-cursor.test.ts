import { describe, expect, it } from "vitest";
import { drawableCellS } from "@/core/strips/cell-width";
import { reachOfDays } from "@/core/strips/reach-of-days";
import { crossingTimes } from "@/core/strips/track-crossings";
import type { LegStripView } from "@/domain/junction";
import { stripQueryFromParams } from "@/domain/query-address";
import { firstCell, moveCursor, readOut, readOutText } from "@/ui/strips/strip-cursor";
import { buildPicture, delayStepS, includeTurn, referencePace, windowOfView } from "@/ui/strips/strip-picture";
import { setOf } from "@tests/core/strips/support";

const movement = (id: number, turn: string, referenceS: number | null) => ({ id, turn, referenceS, cordonUpM: 250, cordonDownM: 60, vehicles: 1 });
const view = {
  leg: { id: 1, lengthM: 200, storageM: 180, freeSpeedMs: 12.5 },
  movements: [movement(1, "through", 31), movement(2, "left", 62)],
  basis: { fromMin: 960, toMin: 970 },
} as unknown as LegStripView;
// Stands at 25 m from 16:02 to 16:03, on two days.
const set = setOf([
  { day: 1, movement: 1, delayS: 60, points: [[57_705, 200], [57_720, 25], [57_780, 25], [57_785, -40]] },
  { day: 2, movement: 1, delayS: 62, points: [[57_705, 200], [57_720, 25], [57_780, 25], [57_785, -40]] },
  { day: 2, movement: 2, delayS: 10, points: [[57_900, 200], [57_918, -40]] },
]);

function pictureOf(params: Record<string, string>, tracks = set) {
  const query = stripQueryFromParams(params);
  const { fromS, toS } = windowOfView(view);
  return buildPicture({
    view,
    query,
    set: tracks,
    include: includeTurn(tracks, view.movements, query.turn),
    crossingS: crossingTimes(tracks),
    reaches: reachOfDays(tracks, fromS, toS, 180),
  });
}

const words = { units: "metric", locale: "en-GB", isTypical: true } as const;

describe("read-out", () => {
  const picture = pictureOf({ shape: "rectangles", cellM: "50", cellS: "60" });
  // Column of 16:02, lowest row.
  const cell = 2;

  it("says time, distance, speed, vehicles, days and tail, and no mean delay of three vehicles", () => {
    const text = readOut(picture, cell, words);
    expect(text.where).toBe("16:03, 25 m");
    expect(text.cell).toMatch(/^\d+ km\/h, 2 vehicles, 2 days$/);
    expect(text.tail).toMatch(/^tail at 25 m/);
    expect(text.delay).toBeNull();
  });

  it("says the mean delay of ten vehicles", () => {
    const ten = setOf([1, 2].flatMap((day) => Array.from({ length: 5 }, () => ({ day, movement: 1, delayS: 58 + 2 * day, points: [[57_705, 200], [57_785, -40]] as [number, number][] }))));
    // Five of 60 s and five of 62 s.
    expect(readOut(pictureOf({ shape: "rectangles", cellM: "50", cellS: "60" }, ten), cell, words).delay).toMatch(/^delay 61 s \(/);
  });

  it("says when nobody was seen, in one line for those who listen", () => {
    expect(readOutText(readOut(picture, picture.strip.spec.columns - 1, words))).toMatch(/^16:10, 25 m; no vehicle seen/);
  });

  it("speaks of feet and miles an hour where the city does", () => {
    expect(readOut(picture, cell, { ...words, units: "us" }).where).toBe("16:03, 82 ft");
  });

  it("leaves the number of days out on a single day", () => {
    expect(readOut(picture, cell, { ...words, isTypical: false }).cell).not.toContain("day");
  });
});

describe("cursor", () => {
  it("starts beside the stop line and stays inside strip and window, leaning cells too", () => {
    for (const shape of ["rectangles", "waves"]) {
      const picture = pictureOf({ cellM: "50", cellS: "60", shape });
      const { columns } = picture.strip.spec;
      let cell = firstCell(picture);
      expect(Math.floor(cell / columns)).toBe(0);
      cell = moveCursor(picture, cell, "first", 1);
      expect(moveCursor(picture, cell, "earlier", 1)).toBe(cell);
      for (let k = 0; k < 20; k++) cell = moveCursor(picture, cell, "farther", 1);
      expect(Math.floor(cell / columns)).toBe(picture.strip.spec.rows - 1);
      const clock = readOut(picture, moveCursor(picture, cell, "last", 1), words).where.slice(0, 5);
      expect(clock >= "16:00" && clock <= "16:10").toBe(true);
    }
  });
});

describe("picture", () => {
  it("takes the tail from all vehicles and the cells from the chosen movement", () => {
    const left = pictureOf({ turn: "left", cellM: "50", cellS: "60" });
    expect(left.strip.vehicles.some((n) => n > 0)).toBe(true);
    expect(Math.max(...left.strip.vehicles)).toBe(1);
    expect(Math.max(...Array.from(left.tail.reachM).filter((reach) => reach >= 0))).toBe(25);
  });

  it("has a reference pace weighed by the movements that were driven", () => {
    // Two vehicles of 31 s and one of 62 s, each from the cordon at 250 m to the end of its track at -40 m.
    expect(referencePace(set, Uint8Array.of(1, 1, 1), view.movements, 10)).toBeCloseTo(124 / 870, 9);
    expect(referencePace(set, Uint8Array.of(0, 0, 0), view.movements, 10)).toBe(0.1);
  });

  it("draws no finer than the window allows", () => {
    expect(drawableCellS(5, { fromS: 0, toS: 7200 })).toBe(5);
    expect(drawableCellS(5, { fromS: 0, toS: 86_400 })).toBe(60);
  });

  it("takes five-minute steps only where vehicles are many", () => {
    expect(delayStepS(600, { fromS: 0, toS: 9000 })).toBe(300);
    expect(delayStepS(599, { fromS: 0, toS: 9000 })).toBe(900);
  });
});
