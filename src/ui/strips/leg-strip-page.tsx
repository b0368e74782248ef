"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { stripQueryFromParams, stripQueryToParams, whenQueryToParams, type LegStripView, type StripQuery } from "@/domain/junction";
import { Caution } from "@/ui/primitives/caution";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { PageHead } from "@/ui/shell/page-head";
import { DelayTable } from "./delay-table";
import { FactsLine } from "./facts-line";
import { legStripQuery, tracksQuery } from "./queries";
import { StripFigure } from "./strip-figure";
import { legTitle } from "./strip-phrases";
import { StripSentence } from "./strip-sentence";
import { useQueryAddress, type AddressCodec } from "./use-query-address";
import { useStripPicture } from "./use-strip-picture";

const CODEC: AddressCodec<StripQuery> = { fromParams: stripQueryFromParams, toParams: stripQueryToParams };

export function LegStripPage({ legId }: { legId: number }) {
  const { query, change } = useQueryAddress(CODEC);
  const figures = useQuery(legStripQuery(legId, query));
  const tracks = useQuery(tracksQuery(legId, query));
  const view = figures.data;
  const drawn = useStripPicture(view, tracks.data, query);

  if (figures.isError && !view) return <Failed message={figures.error.message} onRetry={() => void figures.refetch()} />;
  if (!view) return <Loading title="Reading the leg" />;
  return (
    <article className="flex flex-1 flex-col">
      <PageHead title={legTitle(view.leg)} above={<Crumbs view={view} query={query} />}>
        <div className="mt-1">
          <StripSentence query={query} view={view} onChange={change} />
        </div>
      </PageHead>
      <div className="flex flex-1 flex-col">
        {tracks.isError ? (
          <Failed title="The vehicles' paths could not be read." message={tracks.error.message} onRetry={() => void tracks.refetch()} />
        ) : !drawn ? (
          <Loading title="Reading the vehicles' paths" />
        ) : drawn.picture.set.tracks === 0 ? (
          <NothingSeen query={query} view={view} />
        ) : (
          <StripFigure drawn={drawn} view={view} query={query} />
        )}
      </div>
      {drawn && drawn.picture.set.tracks > 0 ? (
        <>
          <FactsLine facts={drawn.facts} fromMin={view.basis.fromMin} toMin={view.basis.toMin}>
            <Caution />
            {view.leg.doubts.length > 0 ? <Doubts doubts={view.leg.doubts} /> : null}
          </FactsLine>
          <DelayTable picture={drawn.picture} />
        </>
      ) : null}
    </article>
  );
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
