"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useState } from "react";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { stripQueryFromParams, stripQueryToParams, whenQueryToParams } from "@/domain/query-address";
import { MOST_TRACKS } from "@/domain/screen-choices";
import { Caution } from "@/ui/primitives/caution";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { DelayTable } from "./delay-table";
import { FactsLine } from "./facts-line";
import { legStripQuery, tracksQuery } from "./queries";
import { referenceSentence } from "./reference-words";
import { StripFigure } from "./strip-figure";
import { legTitle } from "./strip-phrases";
import { StripSentence } from "./strip-sentence";
import { useQueryAddress, type AddressCodec } from "./use-query-address";
import { useStripPicture, type DrawnStrip } from "./use-strip-picture";

const CODEC: AddressCodec<StripQuery> = { fromParams: stripQueryFromParams, toParams: stripQueryToParams };

export function LegStripPage({ legId }: { legId: number }) {
  const { query, change } = useQueryAddress(CODEC);
  const figures = useQuery(legStripQuery(legId, query));
  const tracks = useQuery(tracksQuery(legId, query));
  const view = figures.data;
  // Figures of the last choice stay while the next ones come, but must not be drawn with the next tracks.
  const drawn = useStripPicture(figures.isPlaceholderData ? undefined : view, tracks.data, query);
  const [shown, setShown] = useState<DrawnStrip | null>(null);
  if (drawn && drawn !== shown) setShown(drawn);

  if (figures.isError && !view) return <Failed message={figures.error.message} onRetry={() => void figures.refetch()} />;
  if (!view) return <Loading title="Reading the leg" />;
  const failure = figures.error ?? tracks.error;
  return (
    <article className="flex flex-1 flex-col">
      <PageHead title={legTitle(view.leg)} above={<Crumbs view={view} query={query} />}>
        <div className="mt-1">
          <StripSentence query={query} view={view} onChange={change} />
        </div>
      </PageHead>
      {failure ? (
        <Failed title="The strip could not be read." message={failure.message} onRetry={() => void Promise.all([figures.refetch(), tracks.refetch()])} />
      ) : !shown ? (
        <Loading title="Reading the vehicles' paths" />
      ) : (
        <div aria-busy={!drawn} className={drawn ? "flex flex-1 flex-col" : "flex flex-1 flex-col opacity-50"}>
          <StripBody shown={shown} />
        </div>
      )}
    </article>
  );
}

function StripBody({ shown }: { shown: DrawnStrip }) {
  const { picture, facts, view, query } = shown;
  const { locale } = useCity();
  if (picture.set.tracks === 0) return <NothingSeen query={query} view={view} />;
  return (
    <>
      <div className="flex-1">
        <StripFigure drawn={shown} />
        {picture.set.tracks >= MOST_TRACKS ? (
          <p className="px-4 pb-3 text-sm text-ink-soft sm:px-6">More vehicles were seen than a strip can show: the newest {MOST_TRACKS.toLocaleString(locale)} are drawn. Choose fewer days or hours for the others.</p>
        ) : null}
      </div>
      <FactsLine facts={facts} fromMin={view.basis.fromMin} toMin={view.basis.toMin}>
        <Caution />
        <ReferenceNote shown={shown} />
        {view.leg.doubts.length > 0 ? <Doubts doubts={view.leg.doubts} /> : null}
      </FactsLine>
      <DelayTable picture={picture} />
    </>
  );
}

function ReferenceNote({ shown: { view, query } }: { shown: DrawnStrip }) {
  const { locale } = useCity();
  const sentence = referenceSentence(view.movements, query.turn, locale);
  return sentence ? <p className="mt-2 text-sm text-ink-soft">{sentence}</p> : null;
}

function Crumbs({ view, query }: { view: LegStripView; query: StripQuery }) {
  const when = whenQueryToParams(query).toString();
  return (
    <Link className="text-link" href={`/junctions/${view.junction.id}${when ? `?${when}` : ""}`}>
      {view.junction.name}
    </Link>
  );
}

function NothingSeen({ query, view }: { query: StripQuery; view: LegStripView }) {
  const others = view.days.filter((day) => day.date !== query.day && day.tracks > 0).length;
  return (
    <Empty title={query.day === undefined ? "No vehicle was seen on this leg in these hours and on these days." : "No vehicle was seen on this leg on that day in these hours."}>
      <p>{others > 0 ? "Choose other hours, or another day, in the sentence above." : "Choose other days or hours in the sentence above."} That nobody was seen does not mean that nobody waited.</p>
    </Empty>
  );
}

function Doubts({ doubts }: { doubts: string[] }) {
  return (
    <div className="mt-2 text-sm text-ink-soft">
      <p className="font-medium text-ink">Worth a look at this leg</p>
      <ul className="list-disc pl-4">
        {doubts.map((doubt) => (
          <li key={doubt}>{doubt}</li>
        ))}
      </ul>
    </div>
  );
}
