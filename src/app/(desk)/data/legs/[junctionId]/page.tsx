import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getLegCheck } from "@/services/legs/get-leg-check";
import { LegCheckPage } from "@/ui/legs/leg-check-page";
import { legCheckQuery } from "@/ui/legs/queries";
import { addLegAction, editLegAction, mergeLegsAction, splitLegAction } from "../actions";

export const metadata: Metadata = { title: "Leg check" };

export default async function OneLegCheckPage({ params }: { params: Promise<{ junctionId: string }> }) {
  const ctx = await pageContext("leg.view");
  const junctionId = Number((await params).junctionId);
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...legCheckQuery(junctionId), queryFn: () => getLegCheck(ctx, { junctionId }) }));
  const actions = { add: addLegAction, edit: editLegAction, merge: mergeLegsAction, split: splitLegAction };
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <LegCheckPage junctionId={junctionId} actions={actions} />
    </HydrationBoundary>
  );
}
