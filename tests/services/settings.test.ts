import { describe, expect, it } from "vitest";
import { settings } from "@/db/schema";
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
});
