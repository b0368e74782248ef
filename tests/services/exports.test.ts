import { expect, it } from "vitest";
import type { RankedJunction, ScreenResult } from "@/domain/screen";
import { screenCsv } from "@/services/screens/export-screen";

const ROW = { code: "J1", name: "Mill Lane", lat: 1, lon: 2, worst: null, delay: null, los: null, spill: null, vehicles: 3, days: 2, evidence: "none" } as unknown as RankedJunction;
const BASIS = { firstDate: "2026-03-02", lastDate: "2026-03-06", methodVersion: 7, fromMin: 960, toMin: 1110 } as ScreenResult["basis"];

it("each row of the ranked list says which days, hours and movements it is of", async () => {
  let text = "";
  for await (const part of screenCsv([ROW], BASIS, { days: "saturday", turn: "left" })) text += part;
  const [header, row] = text.trim().split("\n").map((line) => line.split(","));
  const told = Object.fromEntries(header.map((name, at) => [name, row[at]]));
  expect(row).toHaveLength(header.length);
  expect(told).toMatchObject({ junction_id: "J1", days: "saturday", period: "16:00-18:30", movements: "left", first_date: "2026-03-02", last_date: "2026-03-06", method_version: "7" });
});
