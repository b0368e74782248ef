import { describe, expect, it } from "vitest";
import { nameTurns } from "@/core/traversals/turns";
import type { Exit, Leg } from "@/core/types";

const leg = { bearingDeg: 90 } as Leg;
const turnsTo = (bearings: number[], traffic?: number[]): string[] =>
  nameTurns(leg, bearings.map((bearingDeg) => ({ bearingDeg }) as Exit), traffic).map(({ turn }) => turn);

describe("turn names of an eastbound leg", () => {
  it("names the four ways of a cross", () => {
    expect(turnsTo([0, 90, 180, 270])).toEqual(["left", "through", "right", "uturn"]);
  });

  it("takes the straightest exit for through and the other side of it for turns", () => {
    expect(turnsTo([50, 100, 130])).toEqual(["left", "through", "right"]);
  });

  it("keeps through for the straightest exit up to a bend of 50 degrees", () => {
    expect(turnsTo([42, 180])).toEqual(["through", "right"]);
    expect(turnsTo([38, 180])).toEqual(["left", "right"]);
  });

  it("finds no through where a stem meets a bar", () => {
    expect(turnsTo([0, 180])).toEqual(["left", "right"]);
  });

  it("lets traffic decide between two exits that are about as straight", () => {
    // 34 degrees to the left, 33 to the right.
    expect(turnsTo([56, 123], [11, 138])).toEqual(["left", "through"]);
    expect(turnsTo([57, 124], [11, 138])).toEqual(["left", "through"]);
    expect(turnsTo([80, 122], [11, 138])).toEqual(["through", "right"]);
  });

  it("keeps the straighter one where three degrees lie between them, however busy the other is", () => {
    expect(turnsTo([74, 103], [223, 10])).toEqual(["left", "through"]);
  });

  it("calls a turn of 150 degrees and more a U-turn, a sharp turn below it left or right", () => {
    expect(turnsTo([241, 299])).toEqual(["uturn", "uturn"]);
    expect(turnsTo([239, 301])).toEqual(["right", "left"]);
  });
});
