import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getCoverage } from "@/services/coverage/get-coverage";
import { listUploads } from "@/services/uploads/list-uploads";
import { DataView } from "@/ui/uploads/data-view";
import { coverageQuery, uploadsQuery } from "@/ui/uploads/queries";

export const metadata: Metadata = { title: "Data" };

export default async function DataPage() {
  const ctx = await pageContext("upload.view");
  const client = getQueryClient();
  await forPage(
    Promise.all([
      client.fetchQuery({ ...uploadsQuery(), queryFn: () => listUploads(ctx) }),
      client.fetchQuery({ ...coverageQuery(), queryFn: () => getCoverage(ctx) }),
    ]),
  );
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <DataView />
    </HydrationBoundary>
  );
}
