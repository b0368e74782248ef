import type { IngestReport, UploadKind, UploadView } from "@/domain/upload";
import { formatNumber, formatSeconds } from "@/ui/format";
import { ButtonLink } from "@/ui/primitives/button";
import { Caution } from "@/ui/primitives/caution";
import { useCity } from "@/ui/shell/city";
import { RejectedRows } from "./rejected-rows";
import { rejectedCount, reportWords } from "./report-words";

/** What became of a file that is in: figures, the same in words, and what was left out. */
export function UploadReport({ upload, report }: { upload: UploadView; report: IngestReport }) {
  const { locale, settings } = useCity();
  return (
    <>
      <Figures report={report} kind={upload.kind} />
      <section className="flex flex-col gap-1.5 border-b border-rule px-4 py-5 sm:px-6">
        <h2 className="mb-1 text-xl">In words</h2>
        {reportWords(report, upload.kind, locale, settings.timeZone).map((sentence) => (
          <p key={sentence}>{sentence}</p>
        ))}
        {report.remarks?.map((remark) => <p key={remark}>{remark}</p>)}
        {upload.kind === "legs" && upload.state === "done" ? (
          <ButtonLink href="/data/legs" className="mt-3 self-start">
            Check the legs
          </ButtonLink>
        ) : null}
        {upload.kind === "pings" && upload.state === "done" ? (
          <div className="mt-3 flex flex-col gap-3">
            <ButtonLink href="/screen" tone="strong" className="self-start">
              See the ranked junctions
            </ButtonLink>
            <Caution className="max-w-2xl" />
          </div>
        ) : null}
      </section>
      <section className="px-4 py-5 sm:px-6">
        <h2 className="mb-3 text-xl">Rejected rows</h2>
        <RejectedRows uploadId={upload.id} report={report} hasRejects={upload.hasRejects} />
      </section>
    </>
  );
}

function Figures({ report, kind }: { report: IngestReport; kind: UploadView["kind"] }) {
  const { locale } = useCity();
  const number = (value: number | undefined) => formatNumber(value, locale);
  const rows: [string, string][] = [
    ["rows read", number(report.rowsRead)],
    ["accepted", number(report.accepted)],
    ["rejected", number(rejectedCount(report))],
  ];
  const isIn = report.traversals !== undefined || report.created !== undefined || report.legsDrawn !== undefined;
  const ofKind: Record<UploadKind, [string, string][]> = {
    junctions: [
      ["new junctions", number(report.created)],
      ["brought up to date", number(report.updated)],
    ],
    legs: [
      ["legs drawn", number(report.legsDrawn)],
      ["legs replaced", number(report.legsReplaced)],
      ["junctions touched", number(report.junctionsTouched)],
    ],
    pings: [
      ["vehicles", number(report.vehicles)],
      ["trips", number(report.trips)],
      ["traversals", number(report.traversals)],
      ["junctions covered", report.junctionsTotal === undefined ? "–" : `${number(report.junctionsCovered)} of ${number(report.junctionsTotal)}`],
      ["ping every (median)", formatSeconds(report.medianIntervalS, locale)],
    ],
  };
  const figures = isIn ? [...rows, ...ofKind[kind]] : rows;
  return (
    <dl className="grid grid-cols-2 gap-x-6 gap-y-4 border-b border-rule bg-paper px-4 py-5 sm:px-6 md:grid-cols-4 xl:grid-cols-8">
      {figures.map(([name, value]) => (
        <div key={name} className="flex flex-col-reverse justify-end">
          <dd className="tabular text-2xl font-semibold leading-tight">{value}</dd>
          <dt className="order-1 text-sm text-ink-soft">{name}</dt>
        </div>
      ))}
    </dl>
  );
}
