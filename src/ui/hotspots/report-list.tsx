import Link from "next/link";
import type { ListedReport } from "@/domain/screen";
import { formatInstant } from "@/ui/format";
import { Empty } from "@/ui/primitives/states";

export function ReportList({ reports, locale, timeZone, canPublish }: { reports: ListedReport[]; locale: string; timeZone: string; canPublish: boolean }) {
  if (reports.length === 0) {
    return (
      <Empty title="No hotspot report has been published yet.">
        {canPublish ? (
          <p>
            Choose the junctions on the{" "}
            <Link href="/screen" className="text-link text-ink">
              screen
            </Link>
            , then publish them from there.
          </p>
        ) : (
          <p>The city’s traffic engineers publish them here.</p>
        )}
      </Empty>
    );
  }
  return (
    <ul className="max-w-3xl px-4 sm:px-6">
      {reports.map((report) => (
        <li key={report.id} className="border-b border-rule py-4">
          <Link href={`/hotspots/${report.id}`} className="text-link font-table text-xl font-semibold">
            {report.title}
          </Link>
          <p className="mt-1 text-sm text-ink-soft">Published {formatInstant(report.publishedAt, locale, timeZone)}</p>
        </li>
      ))}
    </ul>
  );
}
