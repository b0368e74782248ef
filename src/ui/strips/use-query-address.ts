"use client";

import { useSearchParams } from "next/navigation";
import { useCallback, useEffect, useRef, useState } from "react";
import type { RawParams } from "@/domain/address";

/** Browsers refuse more than about 200 address changes in half a minute: a drag writes its end, not its way. */
const WRITE_AFTER_MS = 250;

/** How a query stands in the address. Both functions keep their identity. */
export interface AddressCodec<Q> {
  fromParams: (params: RawParams) => Q;
  toParams: (query: Q) => URLSearchParams;
}

/** The address as state: changes show at once and reach the address bar a moment later; Back and links are followed. */
export function useQueryAddress<Q extends object>({ fromParams, toParams }: AddressCodec<Q>) {
  const inBar = useSearchParams().toString();
  const [query, setQuery] = useState<Q>(() => fromParams(paramsOf(inBar)));
  const written = useRef(inBar);

  useEffect(() => {
    if (inBar === written.current) return;
    written.current = inBar;
    setQuery(fromParams(paramsOf(inBar)));
  }, [inBar, fromParams]);

  useEffect(() => {
    const next = toParams(query).toString();
    if (next === written.current) return;
    const timer = setTimeout(() => {
      written.current = next;
      window.history.replaceState(null, "", next ? `?${next}` : window.location.pathname);
    }, WRITE_AFTER_MS);
    return () => clearTimeout(timer);
  }, [query, toParams]);

  const change = useCallback((part: Partial<Q>) => setQuery((now) => ({ ...now, ...part })), []);
  return { query, change };
}

function paramsOf(text: string): RawParams {
  return Object.fromEntries(new URLSearchParams(text));
}
