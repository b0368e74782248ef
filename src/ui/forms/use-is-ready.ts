"use client";

import { useSyncExternalStore } from "react";

const never = () => () => undefined;

/** False until the page listens: a form sent before that would leave the page with what was typed. */
export function useIsReady(): boolean {
  return useSyncExternalStore(never, () => true, () => false);
}
