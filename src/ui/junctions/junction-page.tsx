"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { JunctionView, WhenQuery } from "@/domain/junction";
import { whenQueryFromParams, whenQueryToParams } from "@/domain/query-address";
import { formatDay } from "@/ui/format";
import { CAUTIONS } from "@/ui/primitives/caution";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { explainJunction } from "@/ui/screens/explain";
import { useCan, useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { useQueryAddress, type AddressCodec } from "@/ui/strips/use-query-address";
import { DayProfile } from "./day-profile";
import { JunctionSentence } from "./junction-sentence";
import { JunctionStanding } from "./junction-standing";
import { LegStrips } from "./leg-strips";
import { MovementPlan } from "./movement-plan";
import { MovementTable } from "./movement-table";
import { junctionQuery } from "./queries";
import { TailPlan } from "./tail-plan";

const CODEC: AddressCodec<WhenQuery> = { fromParams: whenQueryFromParams, toParams: whenQueryToParams };

export function JunctionPage({ junctionId }: { junctionId: number }) {
  const { query: when, change } = useQueryAddress(CODEC);
  const { data: view, error, isPlaceholderData, refetch } = useQuery(junctionQuery(junctionId, when));
  if (error && !view) return <Failed message={error.message} onRetry={() => void refetch()} />;
  if (!view) return <Loading title="Reading the junction" />;
  return (
    <article className="flex flex-1 flex-col">
      <PageHead title={view.name} above={<Above view={view} when={when} />}>
        <div className="mt-1">
          <JunctionSentence when={when} view={view} onChange={change} />
        </div>
      </PageHead>
      {error ? (
        <Failed message={error.message} onRetry={() => void refetch()} />
      ) : view.legs.length === 0 ? (
        <NoLegs />
      ) : (
        <div aria-busy={isPlaceholderData} className={isPlaceholderData ? "opacity-50" : undefined}>
          <JunctionBody view={view} when={when} />
        </div>
      )}
    </article>
  );
}

function JunctionBody({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const { settings, locale } = useCity();
  const city = { units: settings.units, locale };
  const doubtful = view.legs.filter((leg) => leg.doubts.length > 0);
  return (
    <>
      {view.score ? (
        <section aria-label="Standing" className="flex flex-wrap items-start gap-x-14 gap-y-3 border-b border-rule px-4 py-4 sm:px-6">
          <JunctionStanding score={view.score} />
          <p className="max-w-[38rem] min-w-64 flex-1">{explainJunction(view.score, city)}</p>
        </section>
      ) : null}
      <div className="grid gap-x-10 gap-y-8 px-4 py-5 sm:px-6 sm:grid-cols-2 xl:grid-cols-[minmax(0,1fr)_minmax(0,1fr)_minmax(0,1.35fr)]">
        <MovementPlan view={view} />
        <TailPlan view={view} when={when} />
        <section aria-labelledby="by-time" className="min-w-0 sm:col-span-2 xl:col-span-1">
          <h2 id="by-time" className="text-[1.05rem] font-medium">
            Delay by time of day
          </h2>
          <DayProfile profile={view.profile} fromMin={view.basis.fromMin} toMin={view.basis.toMin} />
        </section>
      </div>
      <section aria-label="Movements" className="border-t border-rule px-4 py-5 sm:px-6">
        <h2 className="mb-2 text-lg">Movements</h2>
        <MovementTable view={view} when={when} />
      </section>
      <section aria-label="Strips of the legs" className="border-t border-rule px-4 py-5 sm:px-6">
        <h2 className="mb-2 text-lg">Strips of the legs</h2>
        <LegStrips view={view} when={when} />
      </section>
      {doubtful.length > 0 ? (
        <section aria-label="Doubts" className="border-t border-rule px-4 py-5 sm:px-6">
          <h2 className="mb-1 text-lg">Worth a look before you rely on it</h2>
          <ul className="flex flex-col gap-1.5">
            {doubtful.map((leg) => (
              <li key={leg.id}>
                <span className="font-medium">Leg {leg.name}:</span> {leg.doubts.join(" ")}
              </li>
            ))}
          </ul>
        </section>
      ) : null}
      <footer className="mt-auto border-t border-rule bg-paper px-4 py-4 text-sm text-ink-soft sm:px-6">
        <ul className="grid gap-x-10 gap-y-1 sm:grid-cols-2">
          {CAUTIONS.map((caution) => (
            <li key={caution}>{caution}</li>
          ))}
        </ul>
      </footer>
    </>
  );
}

function Above({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const { locale } = useCity();
  const maySeeScreen = useCan("screen.view");
  const mayCheckLegs = useCan("leg.view");
  const suffix = whenQueryToParams(when).toString();
  const facts = [
    view.code,
    view.corridor,
    view.district,
    view.cycleS === null ? null : `cycle ${view.cycleS} s`,
    view.lastRetimed === null ? null : `last retimed ${formatDay(view.lastRetimed, locale)}`,
  ].filter(Boolean);
  return (
    <>
      <Link className="text-link" href={maySeeScreen ? `/screen${suffix ? `?${suffix}&` : "?"}at=${view.id}` : "/junctions"}>
        {maySeeScreen ? "On the screen" : "All junctions"}
      </Link>
      {mayCheckLegs ? (
        <Link className="text-link ml-4" href={`/data/legs/${view.id}`}>
          Check its legs
        </Link>
      ) : null}
      <span className="ml-4">{facts.join(" · ")}</span>
      {view.notes ? <span className="block">{view.notes}</span> : null}
    </>
  );
}

function NoLegs() {
  return (
    <Empty title="No leg of this junction is known yet.">
      <p>Legs are found from moving vehicles. Load pings that pass this junction, or more days of them.</p>
    </Empty>
  );
}
