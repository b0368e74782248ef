"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { LegCheckView } from "@/domain/leg-check";
import { counted } from "@/ui/format";
import { Failed, Loading } from "@/ui/primitives/states";
import { useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { CheckDesk } from "./check-desk";
import type { LegActions } from "./leg-actions";
import { legCheckQuery } from "./queries";
import { RematchNote } from "./rematch-note";

/** One junction's legs over its pings, to look at and, for engineers, to put right. */
export function LegCheckPage({ junctionId, actions }: { junctionId: number; actions: LegActions }) {
  const { data: view, error, refetch } = useQuery(legCheckQuery(junctionId));
  if (error && !view) return <Failed title="The legs could not be read." message={error.message} onRetry={() => void refetch()} />;
  if (!view) return <Loading title="Reading the legs" />;
  return (
    <article className="flex flex-1 flex-col">
      <PageHead title={view.junction.name} above={<Above view={view} />}>
        <p className="mt-1 text-[1.05rem] text-ink-soft">
          <HeadWords view={view} />
        </p>
      </PageHead>
      <RematchNote key={`rematch-${junctionId}`} rematch={view.rematch} />
      {error ? (
        <p role="alert" className="border-b border-rule px-4 py-2.5 font-medium text-tail sm:px-6">
          What is shown may be out of date: {error.message}
        </p>
      ) : null}
      <CheckDesk key={`desk-${junctionId}`} view={view} actions={actions} />
    </article>
  );
}

function Above({ view }: { view: LegCheckView }) {
  return (
    <>
      <Link className="text-link" href="/data/legs">
        Legs to check
      </Link>
      <Link className="text-link ml-4" href={`/junctions/${view.junction.id}`}>
        Open the junction
      </Link>
      <span className="ml-4">{view.junction.code}</span>
    </>
  );
}

function HeadWords({ view }: { view: LegCheckView }) {
  const { locale } = useCity();
  const doubtful = view.legs.filter((leg) => leg.doubts.length > 0).length;
  if (view.legs.length === 0) return <>No leg of this junction is known yet.</>;
  return (
    <>
      {counted(view.legs.length, "leg", "legs", locale)}, {doubtful === 0 ? "none in doubt" : `${doubtful} in doubt, drawn with broken lines`}.
    </>
  );
}
