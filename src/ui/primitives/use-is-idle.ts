"use client";

import { useEffect, useState } from "react";

const LATEST_MS = 2000;

/** True from the first moment of rest on after the component stands on the page and answers to input. */
export function useIsIdle(): boolean {
  const [isIdle, setIdle] = useState(false);
  useEffect(() => {
    const rest = () => setIdle(true);
    // Not in every browser.
    if (!("requestIdleCallback" in window)) {
      const timer = setTimeout(rest, 200);
      return () => clearTimeout(timer);
    }
    const handle = requestIdleCallback(rest, { timeout: LATEST_MS });
    return () => cancelIdleCallback(handle);
  }, []);
  return isIdle;
}
