import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import type { CoverageView, Detection, FileMapping, UploadKind, UploadView } from "@/domain/upload";
import { getJson } from "@/ui/query-client";

/** How often a file that is being read is asked after. */
const WHILE_READING_MS = 1_500;

export interface KnownSupplier {
  id: number;
  name: string;
  /** How its last file of this kind was read. */
  mapping: FileMapping | null;
}

/** What a person has settled about the shape of a file; the rest is found out by the server. */
export interface SettledShape {
  delimiter?: FileMapping["delimiter"];
  header?: "yes" | "no";
}

export function isUnderWay(upload: Pick<UploadView, "state">): boolean {
  return upload.state === "waiting" || upload.state === "reading";
}

export function uploadsQuery() {
  return queryOptions({
    queryKey: ["uploads"],
    queryFn: ({ signal }) => getJson<UploadView[]>("/api/uploads", signal),
    refetchInterval: ({ state }) => (state.data?.some(isUnderWay) ? WHILE_READING_MS : false),
  });
}

export function uploadQuery(uploadId: string) {
  return queryOptions({
    queryKey: ["uploads", uploadId],
    queryFn: ({ signal }) => getJson<UploadView>(`/api/uploads/${uploadId}`, signal),
    refetchInterval: ({ state }) => (state.data && isUnderWay(state.data) ? WHILE_READING_MS : false),
  });
}

export function detectedQuery(uploadId: string, settled: SettledShape) {
  const params = new URLSearchParams({ ...settled }).toString();
  return queryOptions({
    queryKey: ["uploads", uploadId, "detected", params],
    queryFn: ({ signal }) => getJson<Detection>(`/api/uploads/${uploadId}/detected?${params}`, signal),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
  });
}

export function suppliersQuery(kind: UploadKind) {
  return queryOptions({
    queryKey: ["suppliers", kind],
    queryFn: ({ signal }) => getJson<KnownSupplier[]>(`/api/suppliers?kind=${kind}`, signal),
  });
}

export function coverageQuery() {
  return queryOptions({
    queryKey: ["coverage"],
    queryFn: ({ signal }) => getJson<CoverageView>("/api/coverage", signal),
  });
}
