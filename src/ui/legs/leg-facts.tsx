"use client";

import Link from "next/link";
import type { LegCheckView, LegOfCheck } from "@/domain/leg-check";
import { formatLength, formatNumber, formatSpeed } from "@/ui/format";
import { movementWords } from "@/ui/junctions/movement-words";
import { TurnArrow } from "@/ui/screens/turn-arrow";
import { useCity } from "@/ui/shell/city";
import { originWords, stopLineWords } from "./leg-words";

/** What is known of a leg, and what is doubtful about it. */
export function LegFacts({ leg, movements, exits }: { leg: LegOfCheck } & Pick<LegCheckView, "movements" | "exits">) {
  const { settings, locale } = useCity();
  const turns = movements.filter((movement) => movement.legId === leg.id);
  const facts: [string, React.ReactNode][] = [
    ["line", originWords(leg.origin)],
    ["stop line", stopLineWords(leg.stopLineOrigin)],
    ["seen by", `${formatNumber(leg.support, locale)} vehicles`],
    ["followed for", formatLength(leg.lengthM, settings.units, locale)],
    ["storage", formatLength(leg.storageM, settings.units, locale)],
    ["free speed", formatSpeed(leg.freeSpeedMs, settings.units, locale)],
    ["speed limit", formatSpeed(leg.speedLimitMs, settings.units, locale)],
    ["lanes", formatNumber(leg.lanes, locale)],
    ["comes from", leg.upstream ? <Link className="text-link" href={`/data/legs/${leg.upstream.junctionId}`}>{leg.upstream.name}</Link> : "no known junction"],
    ["turns", <Turns key="turns" turns={turns} exits={exits} />],
  ];
  return (
    <>
      {leg.doubts.length > 0 ? (
        <ul aria-label="Doubts" className="flex flex-col gap-1 border-l-[3px] border-tail pl-3">
          {leg.doubts.map((doubt) => (
            <li key={doubt}>{doubt}</li>
          ))}
        </ul>
      ) : null}
      <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-0.5 font-table text-[0.95rem]">
        {facts.map(([name, value]) => (
          <div key={name} className="contents">
            <dt className="text-ink-soft">{name}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
    </>
  );
}

function Turns({ turns, exits }: { turns: LegCheckView["movements"]; exits: LegCheckView["exits"] }) {
  const { locale } = useCity();
  if (turns.length === 0) return <>none seen</>;
  return (
    <span className="flex flex-wrap gap-x-4">
      {turns.map((turn) => (
        <span key={turn.id}>
          <TurnArrow turn={turn.turn} /> {movementWords(turn, turns, exits)} ({formatNumber(Math.abs(turn.turnDeg), locale)}°)
        </span>
      ))}
    </span>
  );
}
