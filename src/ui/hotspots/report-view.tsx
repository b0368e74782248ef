"use client";

import dynamic from "next/dynamic";
import { useMemo, useState } from "react";
import type { RankedJunction } from "@/domain/screen";
import { createHoverStore } from "@/ui/map/hover-store";
import { MapBoundary } from "@/ui/map/map-boundary";
import { Button } from "@/ui/primitives/button";
import { Loading } from "@/ui/primitives/states";
import { useMediaQuery } from "@/ui/primitives/use-media-query";
import { useCity } from "@/ui/shell/city";
import { ReportTable } from "./report-table";

const CityMap = dynamic(() => import("@/ui/map/city-map"), { ssr: false, loading: () => <Loading title="Drawing the map" /> });

/** List and map of a published report, with one selection. */
export function ReportView({ rows }: { rows: RankedJunction[] }) {
  const { settings, locale } = useCity();
  const [selected, setSelected] = useState<number | null>(null);
  const [hover] = useState(createHoverStore);
  const [isMapOpen, setMapOpen] = useState(false);
  const isWide = useMediaQuery("(min-width: 64rem)");
  const ids = useMemo(() => new Set(rows.map((row) => row.junctionId)), [rows]);

  const select = (id: number | null) => {
    setSelected(id);
    if (id !== null) document.getElementById(`junction-${id}`)?.scrollIntoView({ block: "nearest" });
  };

  return (
    <div className="print:block lg:grid lg:grid-cols-[minmax(0,1fr)_minmax(20rem,34rem)]">
      <div className="px-2 py-3 sm:px-4">
        <Button className="mb-2 lg:hidden print:hidden" aria-pressed={isMapOpen} onClick={() => setMapOpen(!isMapOpen)}>
          {isMapOpen ? "Hide the map" : "Show the map"}
        </Button>
        {isMapOpen && !isWide ? <div className="relative mb-3 h-[60dvh] border border-rule">{map()}</div> : null}
        <ReportTable rows={rows} selected={selected} onSelect={select} />
      </div>
      <div className="hidden border-l border-rule lg:block print:hidden">
        <div className="sticky top-0 h-dvh">{isWide ? map() : null}</div>
      </div>
    </div>
  );

  function map() {
    return (
      <MapBoundary>
        <CityMap rows={rows} shownIds={ids} selected={selected} hover={hover} units={settings.units} locale={locale} noteOf={() => null} onSelect={select} />
      </MapBoundary>
    );
  }
}
