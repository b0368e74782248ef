"use client";

import { useMemo, useState } from "react";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { stripQueryToParams } from "@/domain/query-address";
import { formatLength, formatSpeed } from "@/ui/format";
import { Button, ButtonLink } from "@/ui/primitives/button";
import { CAUTIONS } from "@/ui/primitives/caution";
import { daysPhrase, windowPhrase } from "@/ui/screens/phrases";
import { useCan, useCity } from "@/ui/shell/city";
import type { StripWords } from "./draw-lines";
import { factsText } from "./facts-text";
import { referenceSentence } from "./reference-words";
import { download, pictureBlob } from "./save-picture";
import { StripCanvas } from "./strip-canvas";
import { StripLegend } from "./strip-legend";
import { captionOf, legTitle } from "./strip-phrases";
import type { DrawnStrip } from "./use-strip-picture";

/** Key, strip and the ways to take it along. */
export function StripFigure({ drawn }: { drawn: DrawnStrip }) {
  const { settings, locale } = useCity();
  const { units } = settings;
  const { picture, view, query } = drawn;
  const isTypical = query.day === undefined;
  const words = useMemo<StripWords>(() => stripWords(view, query, units, locale), [view, query, units, locale]);
  const reads = useMemo(() => ({ units, locale, isTypical }), [units, locale, isTypical]);
  const hours = windowPhrase(query, view.basis);
  const caption = captionOf(query, view, { days: daysPhrase(query, view.basis, locale), hours, cellS: picture.strip.spec.cellS }, units, locale);
  const label = `Speed on the ${legTitle(view.leg).toLowerCase()}, time across and distance to the stop line upwards. Arrow keys move from cell to cell and read it out, Shift moves ten at once.`;
  return (
    <figure aria-label="Strip" className="flex flex-col">
      <div className="order-last flex flex-wrap items-start justify-between gap-x-2 pt-2 sm:order-none sm:pt-4 xl:flex-nowrap">
        <StripLegend freeMs={picture.freeMs} isTypical={isTypical} hasStorage={view.leg.storageM !== null} />
        <TakeAlong drawn={drawn} words={words} caption={caption} />
      </div>
      <div className="px-2 sm:px-4">
        <StripCanvas picture={picture} words={words} reads={reads} label={label} />
      </div>
    </figure>
  );
}

function stripWords(view: LegStripView, query: StripQuery, units: "metric" | "us", locale: string): StripWords {
  const { storageM, upstream } = view.leg;
  return {
    units,
    lengthAxis: `${units === "us" ? "feet" : "metres"} to the stop line`,
    delayAxis: "delay, s/veh",
    profileAxis: `delay, s per ${formatLength(query.cellM, units, locale)}`,
    stopLine: "stop line",
    storage: storageM === null ? null : `storage ${formatLength(storageM, units, locale)}`,
    upstream: upstream ? `${upstream.name} behind` : null,
  };
}

function TakeAlong({ drawn, words, caption }: { drawn: DrawnStrip; words: StripWords; caption: string }) {
  const { view, query } = drawn;
  const { settings, locale } = useCity();
  const mayExport = useCan("strip.export");
  const [failure, setFailure] = useState<string | null>(null);
  const { units } = settings;

  async function savePicture() {
    setFailure(null);
    try {
      const blob = await pictureBlob(drawn.picture, words, {
        above: `${settings.cityName}: ${view.junction.name}`,
        title: legTitle(view.leg),
        caption,
        facts: `${factsText(drawn.facts, units, locale)} Method version ${view.basis.methodVersion}.`,
        free: `free, ${formatSpeed(drawn.picture.freeMs, units, locale)}`,
        tail: query.day === undefined ? "tail line, 95th percentile of observed reach" : "tail line, farthest reach observed",
        full: view.leg.storageM === null ? null : "storage 90 % full, unseen tail counted",
        cautions: [referenceSentence(view.movements, query.turn, locale), ...CAUTIONS].filter((line): line is string => line !== null),
      });
      download(blob, `strip-${view.junction.code}-${view.leg.id}${query.day ? `-${query.day}` : ""}.png`);
    } catch (error) {
      setFailure(error instanceof Error ? error.message : "The picture could not be made.");
    }
  }

  const params = stripQueryToParams({ ...query, cellS: drawn.picture.strip.spec.cellS }).toString();
  return (
    <div className="flex min-w-0 flex-wrap gap-2 px-4 pb-3 sm:px-6 xl:shrink-0 xl:flex-nowrap">
      <Button onClick={() => void savePicture()}>Save picture</Button>
      {mayExport ? (
        <ButtonLink href={`/api/legs/${view.leg.id}/export?${params}`} download>
          Save cells as CSV
        </ButtonLink>
      ) : null}
      {mayExport ? (
        <p className="max-w-56 self-center text-sm leading-tight text-ink-soft">Cells with fewer than two vehicles are left out of the CSV.</p>
      ) : null}
      {failure ? (
        <p role="alert" className="w-full text-sm text-tail">
          {failure}
        </p>
      ) : null}
    </div>
  );
}
