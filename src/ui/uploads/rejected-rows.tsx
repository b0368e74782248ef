import { REJECT_SENTENCES, type IngestReport, type RejectReason } from "@/domain/upload";
import { formatNumber } from "@/ui/format";
import { ButtonLink } from "@/ui/primitives/button";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { useCity } from "@/ui/shell/city";
import { rejectedCount } from "./report-words";

/** Why rows were left out, the first of them as they stand, and all of them as a file. */
export function RejectedRows({ uploadId, report, hasRejects }: { uploadId: string; report: IngestReport; hasRejects: boolean }) {
  const { locale } = useCity();
  const reasons = Object.entries(report.rejected) as [RejectReason, number][];
  if (reasons.length === 0) return <p>No row was rejected.</p>;
  return (
    <div className="flex flex-col gap-5">
      <RuledTable caption="Rejected rows by reason" className="max-w-2xl">
        <thead>
          <tr>
            <Th>reason</Th>
            <Th numeric>rows</Th>
          </tr>
        </thead>
        <tbody>
          {reasons
            .sort((a, b) => b[1] - a[1])
            .map(([reason, count]) => (
              <tr key={reason}>
                <Td>{REJECT_SENTENCES[reason]}</Td>
                <Td numeric>{formatNumber(count, locale)}</Td>
              </tr>
            ))}
        </tbody>
      </RuledTable>
      <Samples report={report} locale={locale} />
      {hasRejects ? (
        <ButtonLink href={`/api/uploads/${uploadId}/rejects`} download className="self-start">
          Download all rejected rows (CSV)
        </ButtonLink>
      ) : null}
    </div>
  );
}

function Samples({ report, locale }: { report: IngestReport; locale: string }) {
  const shown = report.samples.length;
  const all = rejectedCount(report);
  const caption = shown < all ? `The first ${formatNumber(shown, locale)} of ${formatNumber(all, locale)} rejected rows` : "The rejected rows";
  return (
    <RuledTable caption={caption} showCaption>
      <thead>
        <tr>
          <Th numeric className="w-20">
            line
          </Th>
          <Th className="w-1/4">reason</Th>
          <Th>the row as it stands</Th>
        </tr>
      </thead>
      <tbody>
        {report.samples.map((row) => (
          <tr key={row.line}>
            <Td numeric>{formatNumber(row.line, locale)}</Td>
            <Td className="min-w-40">{REJECT_SENTENCES[row.reason]}</Td>
            <Td className="break-all font-mono text-sm">{row.text}</Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}
