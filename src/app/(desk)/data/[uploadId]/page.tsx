import { dehydrate, HydrationBoundary } from "@tanstack/react-query";
import type { Metadata } from "next";
import { forPage, pageContext } from "@/server/page";
import { getQueryClient } from "@/server/query-client";
import { getUpload } from "@/services/uploads/get-upload";
import { uploadQuery } from "@/ui/uploads/queries";
import { UploadView } from "@/ui/uploads/upload-view";

export const metadata: Metadata = { title: "File" };

interface Props {
  params: Promise<{ uploadId: string }>;
  searchParams: Promise<{ same?: string | string[] }>;
}

export default async function UploadPage({ params, searchParams }: Props) {
  const ctx = await pageContext("upload.view");
  const { uploadId } = await params;
  const { same } = await searchParams;
  const client = getQueryClient();
  await forPage(client.fetchQuery({ ...uploadQuery(uploadId), queryFn: () => getUpload(ctx, { uploadId }) }));
  return (
    <HydrationBoundary state={dehydrate(client)}>
      <UploadView uploadId={uploadId} sameAs={typeof same === "string" ? same : null} />
    </HydrationBoundary>
  );
}
