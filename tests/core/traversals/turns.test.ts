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
    expect(turnsTo([55, 122], [11, 138])).toEqual(["left", "through"]);
    expect(turnsTo([55, 122], [138, 11])).toEqual(["through", "right"]);
    expect(turnsTo([80, 122], [11, 138])).toEqual(["through", "right"]);
  });
});
