import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { listJunctions } from "@/services/junctions/list-junctions";
import { JunctionListPage } from "@/ui/junctions/junction-list-page";
import { junctionsQuery } from "@/ui/junctions/queries";

export const metadata: Metadata = { title: "Junctions" };

export default async function JunctionsPage() {
  const ctx = await pageContext("junction.view");
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...junctionsQuery(), queryFn: () => listJunctions(ctx, { q: "" }) }));
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <JunctionListPage />
    </HydrationBoundary>
  );
}
