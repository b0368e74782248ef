"use client";

import Link from "next/link";
import { USUAL_SCREEN } from "@/domain/query-address";
import type { ScreenQuery } from "@/domain/screen";
import { Button } from "@/ui/primitives/button";
import { Empty } from "@/ui/primitives/states";
import { useCan } from "@/ui/shell/city";

const { minDelay, minSpill, evidence, corridor, q, turn } = USUAL_SCREEN;
const WIDE_OPEN = { minDelay, minSpill, evidence, corridor, q, turn };

export interface ScreenEmptyProps {
  kind: "no-junctions" | "no-traversals" | "filtered";
  onChange: (part: Partial<ScreenQuery>) => void;
}

/** Why there is nothing, and what to change. */
export function ScreenEmpty({ kind, onChange }: ScreenEmptyProps) {
  const canUpload = useCan("upload.create");
  const toData = canUpload ? (
    <Link href="/data" className="text-link text-ink">
      To the data
    </Link>
  ) : null;
  if (kind === "no-junctions") {
    return (
      <Empty title="This city has no junctions yet.">
        <p>Load a file of junctions, then one of pings. The ranking follows by itself.</p>
        {toData}
      </Empty>
    );
  }
  if (kind === "no-traversals") {
    return (
      <Empty title="No vehicle was seen on these days and hours.">
        <p>Choose other days or hours in the sentence above, or load pings that cover them.</p>
        <Button onClick={() => onChange({ days: "every", since: undefined, until: undefined, period: "all", from: undefined, to: undefined })}>All days, all day</Button>
        {toData}
      </Empty>
    );
  }
  return (
    <Empty title="No junction passes these filters.">
      <p>Lower the minimum delay or spillback, accept thinner evidence, or look in the whole city.</p>
      <Button onClick={() => onChange(WIDE_OPEN)}>Drop the filters</Button>
    </Empty>
  );
}
