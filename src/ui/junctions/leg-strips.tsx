"use client";

import Link from "next/link";
import type { JunctionView, LegView, WhenQuery } from "@/domain/junction";
import { whenQueryToParams } from "@/domain/query-address";
import { formatLength } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { useCity } from "@/ui/shell/city";
import { SmallStrip } from "@/ui/strips/small-strip";
import { legDelayWords } from "./leg-delay-words";

/** One row where they fit. */
const COLUMNS: Record<number, string> = { 3: "xl:grid-cols-3", 5: "xl:grid-cols-5", 6: "xl:grid-cols-3" };

/** A small strip for each leg, all on one scale of time and of distance; each opens the large one. */
export function LegStrips({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const suffix = whenQueryToParams(when).toString();
  const longestM = Math.max(...view.legs.map((leg) => leg.lengthM));
  return (
    <ul className={classNames("grid gap-x-8 gap-y-6 sm:grid-cols-2", COLUMNS[view.legs.length] ?? "xl:grid-cols-4")}>
      {view.legs.map((leg) => (
        <li key={leg.id} className="flex min-w-0 flex-col justify-end">
          <Link href={`/legs/${leg.id}${suffix ? `?${suffix}` : ""}`} className="group block outline-offset-4">
            <span className="text-link font-table font-semibold group-hover:bg-[#e3ece8]">Leg {leg.name}</span>
            <LegWords leg={leg} />
            <SmallStrip view={{ leg, movements: view.movements.filter((movement) => movement.legId === leg.id), basis: view.basis }} when={when} longestM={longestM} />
          </Link>
        </li>
      ))}
    </ul>
  );
}

function LegWords({ leg }: { leg: LegView }) {
  const { settings, locale } = useCity();
  const delay = legDelayWords(leg, locale);
  const reach = leg.reachP95M === null ? null : `reach ${formatLength(leg.reachP95M, settings.units, locale)}`;
  return <span className="mb-1 block font-table text-[0.92rem] text-ink-soft">{[delay, reach, `${formatLength(leg.lengthM, settings.units, locale)} of street`].filter(Boolean).join(", ")}</span>;
}
