"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useId } from "react";
import type { ListedJunction } from "@/domain/junction";
import type { RawParams } from "@/domain/address";
import { counted } from "@/ui/format";
import { Input } from "@/ui/primitives/field";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { useCan, useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { useQueryAddress, type AddressCodec } from "@/ui/strips/use-query-address";
import { junctionsQuery } from "./queries";
import { matchingJunctions } from "./matching-junctions";

const CODEC: AddressCodec<{ q: string }> = {
  fromParams: (params: RawParams) => ({ q: typeof params.q === "string" ? params.q.slice(0, 80) : "" }),
  toParams: ({ q }) => new URLSearchParams(q.trim() === "" ? {} : { q: q.trim() }),
};

/** Every junction by name: where a technician begins, and whoever knows what they look for. */
export function JunctionListPage() {
  const { query, change } = useQueryAddress(CODEC);
  const { data: junctions, error, refetch } = useQuery(junctionsQuery());
  const { locale } = useCity();
  const id = useId();
  if (error && !junctions) return <Failed message={error.message} onRetry={() => void refetch()} />;
  if (!junctions) return <Loading title="Reading the junctions" />;
  const found = matchingJunctions(junctions, query.q);
  return (
    <article className="flex flex-1 flex-col">
      <PageHead title="Junctions">
        <form role="search" className="mt-2 flex flex-wrap items-center gap-x-4 gap-y-2" onSubmit={(event) => event.preventDefault()}>
          <label htmlFor={id} className="text-[1.05rem] text-ink-soft">
            Named or numbered like
          </label>
          <Input id={id} type="search" className="max-w-72" value={query.q} placeholder="street, corridor or number" onChange={(event) => change({ q: event.target.value })} />
          <p aria-live="polite" className="text-ink-soft">
            {found.length === junctions.length ? counted(junctions.length, "junction", "junctions", locale) : `${found.length} of ${counted(junctions.length, "junction", "junctions", locale)}`}
          </p>
        </form>
      </PageHead>
      {junctions.length === 0 ? <NoJunctions /> : found.length === 0 ? <NoMatch q={query.q} onClear={() => change({ q: "" })} /> : <JunctionList junctions={found} />}
    </article>
  );
}

function JunctionList({ junctions }: { junctions: ListedJunction[] }) {
  return (
    <ul className="grid grid-cols-1 content-start gap-x-10 px-4 py-3 sm:grid-cols-2 sm:px-6 xl:grid-cols-3">
      {junctions.map((junction) => (
        <li key={junction.id} className="min-w-0 border-b border-rule [contain-intrinsic-size:auto_3.4rem] [content-visibility:auto]">
          <Link href={`/junctions/${junction.id}`} prefetch={false} className="flex min-h-12 items-baseline gap-3 py-2.5 outline-offset-[-2px] hover:bg-paper">
            <span className="w-14 shrink-0 font-table text-sm text-ink-soft">{junction.code}</span>
            <span className="min-w-0 font-table text-[1.05rem] font-medium leading-tight [overflow-wrap:anywhere]">
              {junction.name}
              {junction.corridor ? <span className="block text-sm font-normal text-ink-soft">{junction.corridor}</span> : null}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}

function NoJunctions() {
  const mayUpload = useCan("upload.create");
  return (
    <Empty title="No junction is known yet.">
      {mayUpload ? (
        <p>
          Load a file of junctions on the page{" "}
          <Link href="/data" className="text-link">
            Data
          </Link>
          .
        </p>
      ) : (
        <p>An engineer has to load a file of junctions first.</p>
      )}
    </Empty>
  );
}

function NoMatch({ q, onClear }: { q: string; onClear: () => void }) {
  return (
    <Empty title={`No junction is named or numbered like “${q}”.`}>
      <button type="button" className="text-link min-h-6" onClick={onClear}>
        Show all junctions
      </button>
    </Empty>
  );
}
