import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { listLegsToCheck } from "@/services/legs/list-legs-to-check";
import { LegListPage } from "@/ui/legs/leg-list-page";
import { legsToCheckQuery } from "@/ui/legs/queries";

export const metadata: Metadata = { title: "Legs to check" };

export default async function LegsPage() {
  const ctx = await pageContext("leg.view");
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...legsToCheckQuery(), queryFn: () => listLegsToCheck(ctx) }));
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <LegListPage />
    </HydrationBoundary>
  );
}
