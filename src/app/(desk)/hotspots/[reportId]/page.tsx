import type { Metadata } from "next";
import Link from "next/link";
import { forPage, pageContext } from "@/server/page";
import { getReport } from "@/services/reports/get-report";
import { getSettings } from "@/services/settings/get-settings";
import { formatInstant } from "@/ui/format";
import { ReportNotes } from "@/ui/hotspots/report-notes";
import { ReportView } from "@/ui/hotspots/report-view";
import { reportSentence } from "@/ui/hotspots/report-words";
import { ButtonLink } from "@/ui/primitives/button";
import { LOCALE } from "@/ui/shell/locale";
import { PageHead } from "@/ui/shell/page-head";

export const metadata: Metadata = { title: "Hotspot report" };

export default async function HotspotReportPage({ params }: { params: Promise<{ reportId: string }> }) {
  const ctx = await pageContext("hotspots.view");
  const [report, settings] = await forPage(Promise.all([getReport(ctx, await params), getSettings(ctx)]));
  const above = (
    <>
      <Link href="/hotspots" className="text-link">
        Hotspot reports
      </Link>
      , published {formatInstant(report.publishedAt, LOCALE, settings.timeZone)}
    </>
  );
  return (
    <>
      <PageHead title={report.title} above={above}>
        <p className="mt-1.5 max-w-[60rem] text-lg text-ink-soft">{reportSentence(report.query, report.result, LOCALE)}</p>
        <div className="mt-3 print:hidden">
          <ButtonLink href={`/api/hotspots/${report.id}/export`} download>
            Download as CSV
          </ButtonLink>
        </div>
      </PageHead>
      <ReportView rows={report.result.rows} />
      <ReportNotes basis={report.result.basis} locale={LOCALE} />
    </>
  );
}
