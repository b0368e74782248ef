"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { ReactNode } from "react";
import { Empty, Failed, Loading } from "@/ui/primitives/states";
import { useCan, useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { useFreshFigures } from "@/ui/use-fresh-figures";
import { CoveragePanel, coverageSentence } from "./coverage-panel";
import { coverageQuery, isUnderWay, uploadsQuery } from "./queries";
import { SendForm } from "./send-form";
import { UploadsTable } from "./uploads-table";

/** Files that came in, what they cover, and the form that sends another one. */
export function DataView({ feeds }: { feeds: ReactNode }) {
  const coverage = useQuery(coverageQuery());
  const { locale } = useCity();
  const canSend = useCan("upload.create");
  const mayCheckLegs = useCan("leg.view");
  return (
    <>
      <PageHead title="Data">{coverage.data ? <p className="mt-1 text-[1.05rem] text-ink-soft">{coverageSentence(coverage.data, locale)}</p> : null}</PageHead>
      <div className="grid flex-1 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <div className="border-rule lg:border-r">
          {canSend ? (
            <Part title="Send a file">
              {coverage.isPending ? <Loading title="Looking at what is there" /> : <SendForm firstKind={coverage.data?.junctions === 0 ? "junctions" : "pings"} />}
            </Part>
          ) : null}
          <Part title="Files">
            <Uploads />
          </Part>
        </div>
        <div>
          <Part title="Coverage">
            {coverage.isPending ? <Loading title="Counting junctions" /> : null}
            {coverage.isError ? <Failed title="Coverage could not be read." message={coverage.error.message} onRetry={() => void coverage.refetch()} /> : null}
            {coverage.data ? <CoveragePanel coverage={coverage.data} /> : null}
          </Part>
          <Part title="Feeds">{feeds}</Part>
          {mayCheckLegs ? (
            <Part title="Legs">
              <p className="max-w-xl">
                Legs are found in the pings or drawn in a file.{" "}
                <Link className="text-link" href="/data/legs">
                  Check the legs
                </Link>
                , those in doubt first.
              </p>
            </Part>
          ) : null}
        </div>
      </div>
    </>
  );
}

function Uploads() {
  const uploads = useQuery(uploadsQuery());
  useFreshFigures(uploads.data?.some(isUnderWay) ?? false);
  if (uploads.isPending) return <Loading title="Reading the list of files" />;
  if (uploads.isError) return <Failed title="The list of files could not be read." message={uploads.error.message} onRetry={() => void uploads.refetch()} />;
  if (uploads.data.length === 0) {
    return (
      <Empty title="No file has been sent yet.">
        <p>Send the city&apos;s junctions first, then files of pings.</p>
      </Empty>
    );
  }
  return <UploadsTable uploads={uploads.data} />;
}

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="border-b border-rule px-4 py-5 sm:px-6">
      <h2 className="mb-3 text-xl">{title}</h2>
      {children}
    </section>
  );
}
