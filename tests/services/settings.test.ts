import { describe, expect, it } from "vitest";
import { settings, uploads } from "@/db/schema";
import { CitySettings } from "@/domain/settings";
import { listAudit } from "@/services/audit/list-audit";
import { getSettings } from "@/services/settings/get-settings";
import { saveSettings } from "@/services/settings/save-settings";
import { testContext } from "@tests/support/database";

describe("the city's settings", () => {
  it("are the defaults until someone saves others, and the trail keeps both", async () => {
    const admin = await testContext("admin");
    await admin.db.delete(settings);
    const before = await getSettings(admin);
    expect(before).toMatchObject({ cityName: "My city", timeZone: "UTC", units: "metric", driveSide: "right" });
    const after = CitySettings.parse({ ...before, cityName: "Varnmouth", timeZone: "Atlantic/Azores", units: "us" });
    await saveSettings(admin, after);
    expect(await getSettings(await testContext("nobody"))).toEqual(after);
    expect((await listAudit(admin))[0]).toMatchObject({ action: "changed settings", detail: { before, after } });
  });

  it("refuse a time zone that nobody knows and a period that ends before it begins", async () => {
    const admin = await testContext("admin");
    const valid = CitySettings.parse({});
    await expect(saveSettings(admin, { ...valid, timeZone: "Mars/Olympus" })).rejects.toThrow("Not a time zone");
    const periods = { ...valid.periods, am: { fromMin: 600, toMin: 540 } };
    await expect(saveSettings(admin, { ...valid, periods })).rejects.toThrow("must end after it begins");
  });

  it("refuse a time zone that the server knows and the database does not", async () => {
    const admin = await testContext("admin");
    // To Node the letters mean Kolkata's zone, to PostgreSQL they are an abbreviation of Jerusalem's.
    const lettersOnly = { ...CitySettings.parse({}), timeZone: "IST" };
    await expect(saveSettings(admin, lettersOnly)).rejects.toMatchObject({
      code: "invalid",
      fieldErrors: { timeZone: ["The database does not know the time zone IST. Give an area and place, such as Atlantic/Azores."] },
    });
    expect(await saveSettings(admin, { ...lettersOnly, timeZone: "Asia/Kolkata" })).toMatchObject({ timeZone: "Asia/Kolkata" });
    await saveSettings(admin, CitySettings.parse({}));
  });

  it("keep time zone and side of the road once pings are being read in; the rest may change", async () => {
    const admin = await testContext("admin");
    const before = await getSettings(admin);
    await admin.db.insert(uploads).values({
      kind: "pings", fileName: "monday.csv", storageKey: "uploads/x", bytes: 1, sha256: "0", state: "reading", createdAt: admin.now,
    });
    await expect(saveSettings(admin, { ...before, timeZone: "Europe/Lisbon" })).rejects.toThrow("The time zone cannot change any more");
    const mirrored = saveSettings(admin, { ...before, driveSide: before.driveSide === "right" ? "left" : "right" });
    await expect(mirrored).rejects.toMatchObject({ code: "conflict", fieldErrors: { driveSide: [expect.stringContaining("legs and turns")] } });
    expect(await getSettings(admin)).toEqual(before);
    await saveSettings(admin, { ...before, cityName: "Varnmouth and Isle" });
    expect((await getSettings(admin)).cityName).toBe("Varnmouth and Isle");
  });
});
