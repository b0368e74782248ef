import { CitySettings } from "@/domain/settings";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { getSettings, writeSettings } from "./get-settings";

export async function saveSettings(ctx: Context, input: CitySettings): Promise<CitySettings> {
  requirePermission(ctx, "setting.manage");
  const next = CitySettings.parse(input);
  await ctx.db.transaction(async (tx) => {
    const before = await getSettings({ db: tx });
    await writeSettings(tx, next, ctx.now);
    await recordAudit(tx, ctx, { action: "changed settings", subject: next.cityName, detail: { before, after: next } });
  });
  return next;
}
