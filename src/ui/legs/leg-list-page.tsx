"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useDeferredValue, useId, useMemo } from "react";
import type { LegToCheck } from "@/domain/leg-check";
import type { RawParams } from "@/domain/address";
import { counted, formatNumber } from "@/ui/format";
import { ChoiceList, type Choice } from "@/ui/primitives/choice";
import { Input } from "@/ui/primitives/field";
import { Sentence, SentenceControl } from "@/ui/primitives/sentence";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { useQueryAddress, type AddressCodec } from "@/ui/strips/use-query-address";
import { LegList } from "./leg-list";
import { LEG_CHOICES, matchingLegs, type LegChoice } from "./matching-legs";
import { legsToCheckQuery } from "./queries";

interface ListQuery {
  show: LegChoice;
  q: string;
}

const CODEC: AddressCodec<ListQuery> = {
  fromParams: (params: RawParams) => ({
    show: LEG_CHOICES.find((choice) => choice === params.show) ?? "all",
    q: typeof params.q === "string" ? params.q.slice(0, 80) : "",
  }),
  toParams: ({ show, q }) => new URLSearchParams({ ...(show !== "all" && { show }), ...(q.trim() !== "" && { q: q.trim() }) }),
};

const CHOICES: readonly Choice<LegChoice>[] = [
  { value: "all", label: "all legs" },
  { value: "doubtful", label: "doubtful legs" },
  { value: "locked", label: "locked legs" },
];
const NO_LEGS: LegToCheck[] = [];

/** Every leg of the city, those that the pings leave in doubt first. */
export function LegListPage() {
  const { query, change } = useQueryAddress(CODEC);
  const { data, error, refetch } = useQuery(legsToCheckQuery());
  const filter = useDeferredValue(query);
  const legs = data ?? NO_LEGS;
  const found = useMemo(() => matchingLegs(legs, filter.show, filter.q), [legs, filter]);
  return (
    <article className="flex flex-1 flex-col">
      <PageHead
        title="Legs to check"
        above={
          <Link className="text-link" href="/data">
            Data
          </Link>
        }
      >
        {legs.length > 0 ? <ListSentence query={query} found={found.length} legs={legs} onChange={change} /> : null}
      </PageHead>
      {error && !data ? <Failed title="The legs could not be read." message={error.message} onRetry={() => void refetch()} /> : null}
      {!error && !data ? <Loading title="Reading the legs" /> : null}
      {data?.length === 0 ? <NoLegs /> : null}
      {legs.length > 0 && found.length === 0 ? <NoMatch query={query} onClear={() => change({ show: "all", q: "" })} /> : null}
      {found.length > 0 ? <LegList legs={found} /> : null}
    </article>
  );
}

function ListSentence({ query, found, legs, onChange }: { query: ListQuery; found: number; legs: LegToCheck[]; onChange: (part: Partial<ListQuery>) => void }) {
  const { locale } = useCity();
  const id = useId();
  const doubtful = useMemo(() => legs.filter((leg) => leg.doubts.length > 0).length, [legs]);
  const phrase = CHOICES.find((choice) => choice.value === query.show)?.label ?? "";
  return (
    <>
      <p className="mt-1 max-w-3xl text-ink-soft">
        {counted(legs.length, "leg", "legs", locale)} found or drawn, {doubtful === 0 ? "none" : formatNumber(doubtful, locale)} of them in doubt. A leg that an engineer has looked at and locked stays as it is when new files come in.
      </p>
      <div role="search" className="mt-2 flex flex-wrap items-center gap-x-5 gap-y-2">
        <Sentence label="Which legs are listed">
          <span className="first-letter:uppercase">
            Show{" "}
            <SentenceControl name="Legs" phrase={phrase}>
              {(close) => <ChoiceList legend="Legs" choices={CHOICES} value={query.show} onChoose={(show) => onChange({ show })} onSettle={close} />}
            </SentenceControl>
            , most doubtful first
          </span>
        </Sentence>
        <label htmlFor={id} className="sr-only">
          Junction or leg named like
        </label>
        <Input id={id} type="search" className="max-w-72" value={query.q} placeholder="junction, number or leg" onChange={(event) => onChange({ q: event.target.value })} />
        <p aria-live="polite" className="text-ink-soft">
          {found === legs.length ? counted(legs.length, "leg", "legs", locale) : `${formatNumber(found, locale)} of ${counted(legs.length, "leg", "legs", locale)}`}
        </p>
      </div>
    </>
  );
}

function NoLegs() {
  return (
    <Empty title="No leg is known yet.">
      <p>
        Legs are found from moving vehicles. Send the city&apos;s junctions and a file of pings, or drawn leg lines, on the page{" "}
        <Link href="/data" className="text-link">
          Data
        </Link>
        .
      </p>
    </Empty>
  );
}

function NoMatch({ query, onClear }: { query: ListQuery; onClear: () => void }) {
  const about = query.q.trim() === "" ? "" : ` at a junction or of a name like “${query.q.trim()}”`;
  const kind = query.show === "all" ? "leg" : `${query.show} leg`;
  return (
    <Empty title={`There is no ${kind}${about}.`}>
      <button type="button" className="text-link min-h-6" onClick={onClear}>
        Show all legs
      </button>
    </Empty>
  );
}
