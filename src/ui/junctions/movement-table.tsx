"use client";

import Link from "next/link";
import type { ExitView, JunctionView, LegView, MovementView, WhenQuery } from "@/domain/junction";
import { whenQueryToParams } from "@/domain/query-address";
import { formatLength, formatNumber, formatSeconds, formatShare, shareNumber } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { IntervalMark } from "@/ui/primitives/interval-mark";
import { LosSquare } from "@/ui/primitives/los-square";
import { StorageBar } from "@/ui/primitives/storage-bar";
import { RuledTable, STAYS, Td, Th } from "@/ui/primitives/table";
import { TurnArrow } from "@/ui/screens/turn-arrow";
import { useCity } from "@/ui/shell/city";
import { REFERENCE_SHORT, REFERENCE_WORDS } from "@/ui/strips/reference-words";
import { movementWords } from "./movement-words";

const COLUMNS = 10;
/** Least width of the shared axis of the intervals. */
const LEAST_AXIS_S = 60;

/** Share of time from which spillback is marked, as in the ranked list. */
const MUCH_SPILL = 0.1;

/** One row for each movement under its leg; what is known of the leg's queue stands with the leg. */
export function MovementTable({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const maxS = Math.max(LEAST_AXIS_S, ...view.movements.map((movement) => Math.min(movement.delay?.high ?? 0, 2 * (movement.delay?.value ?? 0))));
  const suffix = whenQueryToParams(when).toString();
  return (
    <RuledTable caption="Movements of this junction">
      <thead>
        <tr>
          <Th>movement</Th>
          <Th numeric>
            mean delay
            <br />
            s/veh
          </Th>
          <Th>95 % interval</Th>
          <Th>LOS</Th>
          <Th numeric>
            95th pct.
            <br />s
          </Th>
          <Th numeric>
            stopping
            <br />%
          </Th>
          <Th numeric>
            stops
            <br />
            /veh
          </Th>
          <Th numeric>
            vehicles
            <br />
            seen
          </Th>
          <Th>evidence</Th>
          <Th>
            reference
            <br />
            time
          </Th>
        </tr>
      </thead>
      {view.legs.map((leg) => (
        <tbody key={leg.id}>
          <LegRow leg={leg} href={`/legs/${leg.id}${suffix ? `?${suffix}` : ""}`} />
          <MovementRows leg={leg} movements={view.movements.filter((movement) => movement.legId === leg.id)} exits={view.exits} maxS={maxS} />
        </tbody>
      ))}
    </RuledTable>
  );
}

function LegRow({ leg, href }: { leg: LegView; href: string }) {
  const { settings, locale } = useCity();
  const { units } = settings;
  const queue =
    leg.reachP95M === null
      ? "reach cannot be said"
      : `reach ${formatLength(leg.reachP95M, units, locale)}${leg.storageM === null ? "" : ` of ${formatLength(leg.storageM, units, locale)}`}, median ${formatLength(leg.reachP50M, units, locale)}`;
  const spill = leg.spill === null ? "spillback cannot be said" : `spills back ${formatShare(leg.spill.value, locale)} of the time (${formatNumber(leg.spill.low * 100, locale)} to ${formatNumber(leg.spill.high * 100, locale)})`;
  return (
    <tr>
      <th scope="rowgroup" colSpan={COLUMNS} className="border-b border-rule bg-paper px-2 py-1.5 text-left font-normal">
        {/* As wide as the window where the table is wider. */}
        <span className="sticky left-2 flex max-w-[calc(100vw-3rem)] flex-wrap items-center gap-x-4 gap-y-1">
          <Link href={href} className="text-link font-semibold">
            Leg {leg.name}
          </Link>
          <span className="inline-flex items-center gap-2 text-ink-soft">
            {queue}
            {leg.reachP95M !== null && leg.storageM !== null ? <StorageBar reachM={leg.reachP95M} storageM={leg.storageM} /> : null}
          </span>
          <span className={leg.spill !== null && leg.spill.value >= MUCH_SPILL ? "font-medium text-tail" : "text-ink-soft"}>{spill}</span>
          {leg.reachEstimateP95M ? (
            <span className="text-ink-soft" title="A model of the vehicles that were not seen, not an observation">
              with the unseen tail about {formatLength(leg.reachEstimateP95M.value, units, locale)}
            </span>
          ) : null}
        </span>
      </th>
    </tr>
  );
}

/** Movements that were seen, then in one line those that exist and were not seen in these hours. */
function MovementRows({ leg, movements, exits, maxS }: { leg: LegView; movements: MovementView[]; exits: ExitView[]; maxS: number }) {
  const seen = movements.filter((movement) => movement.vehicles > 0);
  const unseen = movements.filter((movement) => movement.vehicles === 0);
  return (
    <>
      {seen.map((movement) => (
        <MovementRow key={movement.id} movement={movement} words={movementWords(movement, movements, exits)} leg={leg} maxS={maxS} />
      ))}
      {unseen.length > 0 ? (
        <tr>
          <td colSpan={COLUMNS} className="border-b border-rule px-2 py-1.5 text-sm text-ink-soft">
            Not seen in these hours: {unseen.map((movement) => movementWords(movement, movements, exits)).join("; ")}.
          </td>
        </tr>
      ) : null}
    </>
  );
}

function MovementRow({ movement, words, leg, maxS }: { movement: MovementView; words: string; leg: LegView; maxS: number }) {
  const { locale } = useCity();
  const { delay } = movement;
  return (
    <tr>
      <th scope="row" className={classNames(STAYS, "min-w-28 border-b border-rule px-2 py-2 text-left align-top font-medium sm:whitespace-nowrap")}>
        <TurnArrow turn={movement.turn} /> {words}
        <span className="sr-only"> {leg.name}</span>
      </th>
      <Td numeric className={movement.evidence === "none" ? "text-ink-soft" : "text-[1.02rem] font-semibold"}>
        {delay === null ? <span className="text-sm font-normal text-ink-soft">no figure</span> : formatNumber(delay.value, locale)}
      </Td>
      <Td>
        <span className="flex items-center gap-2 whitespace-nowrap">
          <IntervalMark estimate={delay} max={maxS} describe={(e) => `95 % interval ${formatSeconds(e.low, locale)} to ${formatSeconds(e.high, locale)}`} />
          {delay ? (
            <span aria-hidden="true" className="text-sm text-ink-soft">
              {formatNumber(delay.low, locale)} to {formatNumber(delay.high, locale)}
            </span>
          ) : null}
        </span>
      </Td>
      <Td className="whitespace-nowrap">
        <LosSquare los={movement.los} />
      </Td>
      <Td numeric>{formatNumber(movement.p95S, locale)}</Td>
      <Td numeric>{shareNumber(movement.stopShare?.value, locale)}</Td>
      <Td numeric>{formatNumber(movement.stopsPerVehicle, locale, 1)}</Td>
      <Td numeric>{formatNumber(movement.vehicles, locale)}</Td>
      <Td>
        <EvidenceBar evidence={movement.evidence} withWord />
      </Td>
      <Td className="whitespace-nowrap text-ink-soft">
        <Reference movement={movement} />
      </Td>
    </tr>
  );
}

/** The time that an undelayed vehicle needs, and where it comes from: no delay is shown without it. */
function Reference({ movement }: { movement: MovementView }) {
  const { locale } = useCity();
  if (movement.referenceS === null) return "–";
  const rests = movement.referenceSource === "free-speed" ? "" : `, ${formatNumber(movement.referenceN, locale)} ${movement.referenceN === 1 ? "vehicle" : "vehicles"}`;
  return (
    <span title={`${REFERENCE_WORDS[movement.referenceSource]}${rests}`}>
      {formatSeconds(movement.referenceS, locale)} <span className="text-sm">({REFERENCE_SHORT[movement.referenceSource]}{movement.referenceSource === "free-speed" ? "" : ` ${movement.referenceN}`})</span>
      <span className="sr-only">
        {", "}
        {REFERENCE_WORDS[movement.referenceSource]}
        {rests}
      </span>
    </span>
  );
}
