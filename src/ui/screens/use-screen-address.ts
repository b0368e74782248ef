"use client";

import { useSearchParams } from "next/navigation";
import { useCallback, useEffect, useRef, useState } from "react";
import type { ScreenQuery } from "@/domain/screen";
import { screenAddressFromParams, screenAddressToParams, type ScreenAddress } from "./screen-address";

/** Browsers refuse more than about 200 address changes in half a minute: a drag writes its end, not its way. */
const WRITE_AFTER_MS = 250;

/** The address as state: changes show at once and reach the address bar a moment later; Back and links are followed. */
export function useScreenAddress() {
  const inBar = useSearchParams().toString();
  const [address, setAddress] = useState<ScreenAddress>(() => screenAddressFromParams(new URLSearchParams(inBar)));
  const written = useRef(inBar);

  useEffect(() => {
    if (inBar === written.current) return;
    written.current = inBar;
    setAddress(screenAddressFromParams(new URLSearchParams(inBar)));
  }, [inBar]);

  useEffect(() => {
    const next = screenAddressToParams(address).toString();
    if (next === written.current) return;
    const timer = setTimeout(() => {
      written.current = next;
      window.history.replaceState(null, "", next ? `?${next}` : window.location.pathname);
    }, WRITE_AFTER_MS);
    return () => clearTimeout(timer);
  }, [address]);

  const change = useCallback((part: Partial<ScreenQuery>) => {
    setAddress((now) => ({ ...now, query: { ...now.query, ...part } }));
  }, []);
  const select = useCallback((at: number | null) => setAddress((now) => ({ ...now, at })), []);
  return { ...address, change, select };
}
