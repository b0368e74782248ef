import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { whenQueryFromParams } from "@/domain/query-address";
import type { RawParams } from "@/domain/address";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getJunction } from "@/services/junctions/get-junction";
import { JunctionPage } from "@/ui/junctions/junction-page";
import { junctionQuery } from "@/ui/junctions/queries";

export const metadata: Metadata = { title: "Junction" };

interface PageProps {
  params: Promise<{ junctionId: string }>;
  searchParams: Promise<RawParams>;
}

export default async function OneJunctionPage({ params, searchParams }: PageProps) {
  const ctx = await pageContext("junction.view");
  const junctionId = Number((await params).junctionId);
  const when = whenQueryFromParams(await searchParams);
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...junctionQuery(junctionId, when), queryFn: () => getJunction(ctx, { junctionId, when }) }));
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <JunctionPage junctionId={junctionId} />
    </HydrationBoundary>
  );
}
