import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { stripQueryFromParams } from "@/domain/query-address";
import type { RawParams } from "@/domain/address";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getLegStrip } from "@/services/strips/get-leg-strip";
import { LegStripPage } from "@/ui/strips/leg-strip-page";
import { legStripQuery } from "@/ui/strips/queries";

export const metadata: Metadata = { title: "Leg strip" };

interface PageProps {
  params: Promise<{ legId: string }>;
  searchParams: Promise<RawParams>;
}

export default async function LegPage({ params, searchParams }: PageProps) {
  const ctx = await pageContext("strip.view");
  const legId = Number((await params).legId);
  const query = stripQueryFromParams(await searchParams);
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...legStripQuery(legId, query), queryFn: () => getLegStrip(ctx, { legId, query }) }));
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <LegStripPage legId={legId} />
    </HydrationBoundary>
  );
}
