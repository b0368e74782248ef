import { describe, expect, it } from "vitest";
import { VehicleNames } from "@/formats/vehicle-names";

describe("VehicleNames", () => {
  it("numbers names in order of appearance, also beyond its first size", () => {
    const names = new VehicleNames();
    for (let round = 0; round < 2; round += 1) {
      for (let i = 0; i < 20_000; i += 1) expect(names.internText(`vehicle ${i}`)).toBe(i);
    }
    expect(names.size).toBe(20_000);
    expect(names.nameOf(12_345)).toBe("vehicle 12345");
  });
});
