"use client";

import { useState } from "react";
import type { Rematch } from "@/domain/leg-check";
import { useFreshFigures } from "@/ui/use-fresh-figures";
import { isUnderWay } from "./queries";

const WORDS = {
  waiting: "The legs are changed. The pings around the junction wait to be matched to them anew; until then figures are those of the old legs.",
  running: "The pings around the junction are being matched to the changed legs. You may leave this page.",
  failed: "Matching the pings anew failed on our side: figures are still those of the old legs. Save a leg again, and tell your administrator if it fails again.",
} as const;

/** Says how far matching anew has come, and has every figure read afresh once it is done. */
export function RematchNote({ rematch }: { rematch: Rematch }) {
  const [last, setLast] = useState(rematch);
  const [isDone, setDone] = useState(false);
  if (last !== rematch) {
    setDone(rematch === null && isUnderWay(last));
    setLast(rematch);
  }
  useFreshFigures(isUnderWay(rematch));
  const words = rematch === null ? (isDone ? "The pings around the junction are matched to the changed legs: all figures are up to date." : "") : WORDS[rematch];
  return (
    <p role="status" className={words ? `border-b border-rule bg-sheet px-4 py-2.5 sm:px-6 lg:sticky lg:top-0 lg:z-10 ${rematch === "failed" ? "font-medium text-tail" : ""}` : "sr-only"}>
      {words}
    </p>
  );
}
