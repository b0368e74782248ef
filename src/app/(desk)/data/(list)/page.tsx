import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getCoverage } from "@/services/coverage/get-coverage";
import { listFeedTokens } from "@/services/feed/feed-tokens";
import { listUploads } from "@/services/uploads/list-uploads";
import { FeedsPanel } from "@/ui/feeds/feeds-panel";
import { DataView } from "@/ui/uploads/data-view";
import { coverageQuery, uploadsQuery } from "@/ui/uploads/queries";
import { makeFeedTokenAction, revokeFeedTokenAction } from "../actions";

export const metadata: Metadata = { title: "Data" };

export default async function DataPage() {
  const ctx = await pageContext("upload.view");
  const client = getQueryClient();
  const [tokens] = await forPage(
    Promise.all([
      listFeedTokens(ctx),
      client.fetchQuery({ ...uploadsQuery(), queryFn: () => listUploads(ctx) }),
      client.fetchQuery({ ...coverageQuery(), queryFn: () => getCoverage(ctx) }),
    ]),
  );
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <DataView feeds={<FeedsPanel tokens={tokens} make={makeFeedTokenAction} revoke={revokeFeedTokenAction} />} />
    </HydrationBoundary>
  );
}
