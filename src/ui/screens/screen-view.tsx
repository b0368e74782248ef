"use client";

import { useQuery } from "@tanstack/react-query";
import dynamic from "next/dynamic";
import { useDeferredValue, useMemo, useState } from "react";
import type { ActionResult } from "@/domain/errors";
import type { RankedJunction, ScreenQuery } from "@/domain/screen";
import { applyScreenFilter } from "@/domain/screen-filter";
import { createHoverStore } from "@/ui/map/hover-store";
import { MapBoundary } from "@/ui/map/map-boundary";
import { RequestFailed } from "@/ui/primitives/request-failed";
import { Loading } from "@/ui/primitives/states";
import { useIsIdle } from "@/ui/primitives/use-is-idle";
import { useMediaQuery } from "@/ui/primitives/use-media-query";
import { useCity } from "@/ui/shell/city";
import { movementName } from "./explain";
import { screenQuery } from "./queries";
import { RankingTable } from "./ranking-table";
import { ScreenEmpty } from "./screen-empty";
import { ScreenFoot } from "./screen-foot";
import { ScreenSentence } from "./screen-sentence";
import { ScreenTools } from "./screen-tools";
import { useScreenAddress } from "./use-screen-address";

/** The map library is large: it is asked for once the list is there and usable. */
const CityMap = dynamic(() => import("@/ui/map/city-map"), { ssr: false, loading: () => <Loading title="Drawing the map" /> });

export interface PublishInput {
  title: string;
  query: ScreenQuery;
}
export type PublishAction = (input: PublishInput) => Promise<ActionResult<{ id: string }>>;

const NO_ROWS: RankedJunction[] = [];

export function ScreenView({ publish }: { publish: PublishAction }) {
  const { settings, locale } = useCity();
  const { query, at, change, select } = useScreenAddress();
  const { data: result, error, isPending, isPlaceholderData, refetch } = useQuery(screenQuery(query));
  const [hover] = useState(createHoverStore);
  const [isMapOpen, setMapOpen] = useState(false);
  const isWide = useMediaQuery("(min-width: 64rem)");
  const isIdle = useIsIdle();

  const all = result?.rows ?? NO_ROWS;
  const filter = useDeferredValue(query);
  const rows = useMemo(() => applyScreenFilter(all, filter), [all, filter]);
  const shownIds = useMemo(() => new Set(rows.map((row) => row.junctionId)), [rows]);
  const scale = useMemo(() => scaleOf(all), [all]);

  return (
    <div className="flex flex-1 flex-col lg:h-[calc(100dvh-3.3rem)] lg:min-h-[30rem] lg:flex-none">
      <h1 className="sr-only">Screen of {settings.cityName}</h1>
      <div className="border-b border-rule bg-paper px-4 py-2.5 sm:px-6">
        <ScreenSentence query={query} onChange={change} result={result} shown={isPlaceholderData ? null : rows.length} />
      </div>
      {error && !result ? <RequestFailed title="The ranking could not be read." error={error} onRetry={() => void refetch()} /> : null}
      {isPending ? <Loading title="Ranking the junctions" /> : null}
      {result && result.total === 0 ? <ScreenEmpty kind="no-junctions" onChange={change} /> : null}
      {result && result.total > 0 ? (
        <div className="flex min-h-0 flex-1 flex-col lg:grid lg:grid-cols-[minmax(24rem,1fr)_minmax(30rem,max(47rem,41%))] lg:grid-rows-[minmax(0,1fr)]">
          <div className={`${isMapOpen ? "relative h-[70dvh] border-b border-rule" : "hidden"} lg:relative lg:block lg:h-auto lg:border-b-0 lg:border-r`}>
            {isMapOpen || (isWide && isIdle) ? (
              <MapBoundary>
                <CityMap rows={all} shownIds={shownIds} selected={at} hover={hover} units={settings.units} locale={locale} noteOf={noteOf} onSelect={select} />
              </MapBoundary>
            ) : null}
          </div>
          <div className="flex min-h-0 flex-col" aria-busy={isPlaceholderData}>
            <ScreenTools query={query} onChange={change} publish={publish} isMapOpen={isMapOpen} onToggleMap={() => setMapOpen(!isMapOpen)} shown={rows.length} />
            <div data-scrolls className={`relative min-h-0 flex-1 lg:overflow-y-auto ${isPlaceholderData ? "opacity-60" : ""}`}>
              {rows.length > 0 ? (
                <RankingTable {...scale} rows={rows} query={filter} selected={at} onSelect={select} onHover={hover.set} onSort={change} />
              ) : (
                <ScreenEmpty kind={result.basis.traversals === 0 ? "no-traversals" : "filtered"} onChange={change} />
              )}
            </div>
            <ScreenFoot result={result} query={query} onChange={change} />
          </div>
        </div>
      ) : null}
    </div>
  );
}

function noteOf({ worst }: RankedJunction): string | null {
  return worst && `${movementName(worst)} ${Math.round(worst.delayS)} s`;
}

/** The axis of delays ends at the highest upper bound, but not so far out that one wild interval flattens all others. */
function scaleOf(rows: readonly RankedJunction[]): { maxDelayS: number; lastRank: number } {
  const ranked = rows.filter((row) => row.rank !== null && row.delay !== null);
  const mostS = ranked.reduce((most, { delay }) => Math.max(most, delay?.value ?? 0), 1);
  const highS = ranked.reduce((most, { delay }) => Math.max(most, delay?.high ?? 0), 1);
  return { maxDelayS: Math.min(highS, mostS * 1.4), lastRank: ranked.length };
}
