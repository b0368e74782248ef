import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import type { RawParams } from "@/domain/address";
import { screenQueryFromParams } from "@/domain/query-address";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { listCorridors } from "@/services/corridors/list-corridors";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { corridorsQuery, screenQuery } from "@/ui/screens/queries";
import { ScreenView } from "@/ui/screens/screen-view";
import { publishReportAction } from "./actions";

export const metadata: Metadata = { title: "Screen" };

export default async function ScreenPage({ searchParams }: { searchParams: Promise<RawParams> }) {
  const ctx = await pageContext("screen.view");
  const query = screenQueryFromParams(await searchParams);
  const client = getQueryClient();
  await forPage(
    Promise.all([
      client.fetchQuery({ ...screenQuery(query), queryFn: () => rankJunctions(ctx, query) }),
      client.fetchQuery({ ...corridorsQuery(), queryFn: () => listCorridors(ctx) }),
    ]),
  );
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <ScreenView publish={publishReportAction} />
    </HydrationBoundary>
  );
}
