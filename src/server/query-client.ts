import { QueryClient } from "@tanstack/react-query";
import { cache } from "react";

/** One for each request, so that what one person fetched never reaches another. */
export const getQueryClient = cache(() => new QueryClient({ defaultOptions: { queries: { staleTime: 60_000, retry: false } } }));
