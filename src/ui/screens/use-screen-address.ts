"use client";

import { useSearchParams } from "next/navigation";
import { useCallback, useEffect, useRef, useState } from "react";
import type { ScreenQuery } from "@/domain/screen";
import { screenAddressFromParams, screenAddressToParams, type ScreenAddress } from "./screen-address";

/** Browsers refuse more than about 200 address changes in half a minute: a drag writes a few and its end. */
const WRITE_EVERY_MS = 250;

/** The address as state: changes show at once and reach the address bar right after; Back and links are followed. */
export function useScreenAddress() {
  const inBar = useSearchParams().toString();
  const [address, setAddress] = useState<ScreenAddress>(() => screenAddressFromParams(new URLSearchParams(inBar)));
  const written = useRef(inBar);
  const writtenAtMs = useRef(-Infinity);

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
      writtenAtMs.current = performance.now();
      window.history.replaceState(null, "", next ? `?${next}` : window.location.pathname);
    }, Math.max(0, writtenAtMs.current + WRITE_EVERY_MS - performance.now()));
    return () => clearTimeout(timer);
  }, [address]);

  const change = useCallback((part: Partial<ScreenQuery>) => {
    setAddress((now) => ({ ...now, query: { ...now.query, ...part } }));
  }, []);
  const select = useCallback((at: number | null) => setAddress((now) => ({ ...now, at })), []);
  return { ...address, change, select };
}
