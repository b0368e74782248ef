"use client";

import type { RankedJunction } from "@/domain/screen";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { LosSquare } from "@/ui/primitives/los-square";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { formatSeconds } from "@/ui/format";
import { useCity } from "@/ui/shell/city";
import { plainFinding } from "./report-words";

/** The ranked list for readers: fewer columns, more words. */
export function ReportTable({ rows, selected, onSelect }: { rows: RankedJunction[]; selected: number | null; onSelect: (junctionId: number | null) => void }) {
  const { settings, locale } = useCity();
  const city = { units: settings.units, locale };
  return (
    <RuledTable caption="Junctions of this report">
      <thead>
        <tr>
          <Th numeric>rank</Th>
          <Th>junction and finding</Th>
          <Th numeric>
            average
            <br />
            time lost
          </Th>
          <Th>grade</Th>
          <Th className="hidden sm:table-cell">evidence</Th>
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => (
          <tr key={row.junctionId} id={`junction-${row.junctionId}`} className={row.junctionId === selected ? "bg-[#E7EFEB]" : undefined}>
            <Td numeric className="w-14">
              <span className="text-lg leading-tight">{row.rank ?? "–"}</span>
              <RankWords row={row} />
            </Td>
            <Td>
              <button type="button" aria-pressed={row.junctionId === selected} onClick={() => onSelect(row.junctionId === selected ? null : row.junctionId)} className="min-h-6 text-left text-[1.05rem] font-semibold">
                {row.name}
              </button>
              <p className="max-w-[46rem] font-text text-[0.95rem] text-ink-soft">{plainFinding(row, city)}</p>
            </Td>
            <Td numeric className="whitespace-nowrap text-lg font-semibold leading-tight">
              {formatSeconds(row.delay?.value, locale)}
            </Td>
            <Td>
              <LosSquare los={row.los} />
            </Td>
            <Td className="hidden sm:table-cell">
              <EvidenceBar evidence={row.evidence} withWord />
            </Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

function RankWords({ row: { rankLow, rankHigh } }: { row: RankedJunction }) {
  if (rankLow === null || rankHigh === null || rankLow === rankHigh) return null;
  return (
    <span className="block whitespace-nowrap text-xs text-ink-soft">
      <span className="sr-only">could be </span>
      {rankLow} to {rankHigh}
    </span>
  );
}
