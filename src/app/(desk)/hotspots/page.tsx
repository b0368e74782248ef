import type { Metadata } from "next";
import { can } from "@/domain/actor";
import { forPage, pageContext } from "@/server/page";
import { listReports } from "@/services/reports/list-reports";
import { getSettings } from "@/services/settings/get-settings";
import { ReportList } from "@/ui/hotspots/report-list";
import { LOCALE } from "@/ui/shell/locale";
import { PageHead } from "@/ui/shell/page-head";

export const metadata: Metadata = { title: "Hotspots" };

export default async function HotspotsPage() {
  const ctx = await pageContext("hotspots.view");
  const [reports, settings] = await forPage(Promise.all([listReports(ctx), getSettings(ctx)]));
  return (
    <>
      <PageHead title="Hotspot reports" above={settings.cityName} />
      <ReportList reports={reports} locale={LOCALE} timeZone={settings.timeZone} canPublish={can(ctx.actor, "hotspots.publish")} />
    </>
  );
}
