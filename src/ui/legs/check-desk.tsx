"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useEffect, useRef, useState } from "react";
import type { LegCheckView } from "@/domain/leg-check";
import type { RawParams } from "@/domain/address";
import { Button } from "@/ui/primitives/button";
import { Empty } from "@/ui/primitives/states";
import { useCan } from "@/ui/shell/city";
import { useQueryAddress, type AddressCodec } from "@/ui/strips/use-query-address";
import { CheckPlan } from "./check-plan";
import type { CloudStyle } from "./cloud-colors";
import { DrawForm } from "./draw-form";
import type { LegActions } from "./leg-actions";
import { LegPanel } from "./leg-panel";
import { LegPicker } from "./leg-picker";
import { shiftedLine } from "./leg-shape";
import { FIRST_RADIUS, PlanTools, RADII_M } from "./plan-tools";
import { pingCloudQuery } from "./queries";
import { useDrawing, type Drawing } from "./use-drawing";

const CODEC: AddressCodec<{ leg: number | null }> = {
  fromParams: (params: RawParams) => ({ leg: typeof params.leg === "string" && /^\d{1,9}$/.test(params.leg) ? Number(params.leg) : null }),
  toParams: ({ leg }) => new URLSearchParams(leg === null ? {} : { leg: String(leg) }),
};

/** Plan and forms side by side: what is chosen, moved or drawn on one shows on the other. */
export function CheckDesk({ view, actions }: { view: LegCheckView; actions: LegActions }) {
  const mayEdit = useCan("leg.edit");
  const client = useQueryClient();
  const { query, change } = useQueryAddress(CODEC);
  const cloud = useQuery(pingCloudQuery(view.junction.id));
  const [zoom, setZoom] = useState<number>(FIRST_RADIUS);
  const [style, setStyle] = useState<CloudStyle>("direction");
  const [shiftM, setShiftM] = useState(0);
  const drawn = useDrawing();
  const addButton = useFocusAfter(drawn.drawing !== null);
  const leg = view.legs.find((candidate) => candidate.id === query.leg) ?? view.legs[0] ?? null;
  const preview = leg && shiftM !== 0 ? shiftedLine(leg.line, shiftM) : null;

  function select(legId: number) {
    setShiftM(0);
    change({ leg: legId });
  }

  function draw(drawing: Drawing) {
    setShiftM(0);
    drawn.begin(drawing);
  }

  async function refresh() {
    // Names and figures of the legs stand on many pages.
    await client.invalidateQueries();
    setShiftM(0);
  }

  return (
    <div className="grid flex-1 items-start lg:grid-cols-[minmax(0,1fr)_minmax(22rem,27rem)]">
      <section aria-label="Plan" className="flex min-w-0 flex-col gap-3 px-4 py-4 sm:px-6 lg:sticky lg:top-11">
        <PlanTools zoom={zoom} onZoom={setZoom} style={style} onStyle={setStyle} pings={cloud.data ? cloud.data.eastM.length : null} />
        {cloud.isError ? <CloudFailed message={cloud.error.message} onRetry={() => void cloud.refetch()} /> : null}
        <CheckPlan
          view={view}
          cloud={cloud.data}
          style={style}
          radiusM={RADII_M[zoom]}
          selected={drawn.drawing ? null : (leg?.id ?? null)}
          preview={preview}
          shiftM={shiftM}
          mayEdit={mayEdit}
          lines={drawn.drawing ? drawn.lines : null}
          active={drawn.active}
          onSelect={select}
          onShift={setShiftM}
          onPoint={drawn.addPoint}
        />
      </section>
      <div className="flex flex-col gap-5 border-rule px-4 py-4 sm:px-6 lg:min-h-full lg:border-l">
        {drawn.drawing ? (
          <DrawForm
            view={view}
            drawing={drawn.drawing}
            controls={drawn}
            actions={actions}
            onSaved={async (legId) => {
              await refresh();
              drawn.end();
              select(legId);
            }}
          />
        ) : (
          <>
            {leg ? <LegPicker legs={view.legs} selected={leg.id} onSelect={select} /> : <NoLegs mayEdit={mayEdit} />}
            {mayEdit ? (
              <Button ref={addButton} className="self-start" onClick={() => draw({ kind: "add" })}>
                Add a leg
              </Button>
            ) : null}
            {leg ? (
              <LegPanel
                key={leg.id}
                view={view}
                leg={leg}
                actions={actions}
                mayEdit={mayEdit}
                shiftM={shiftM}
                isTooShort={shiftM !== 0 && preview === null}
                onShift={setShiftM}
                onDraw={draw}
                onSaved={refresh}
              />
            ) : null}
          </>
        )}
      </div>
    </div>
  );
}

/** Gives the focus to a button once the form that took its place is gone. */
function useFocusAfter(isAway: boolean) {
  const button = useRef<HTMLButtonElement>(null);
  const wasAway = useRef(false);
  useEffect(() => {
    if (wasAway.current && !isAway) button.current?.focus();
    wasAway.current = isAway;
  }, [isAway]);
  return button;
}

function NoLegs({ mayEdit }: { mayEdit: boolean }) {
  return (
    <Empty title="No leg of this junction is known yet.">
      <p>Legs are found from moving vehicles: load pings that pass this junction{mayEdit ? ", or draw a leg yourself" : ""}.</p>
    </Empty>
  );
}

function CloudFailed({ message, onRetry }: { message: string; onRetry: () => void }) {
  return (
    <p role="alert" className="flex flex-wrap items-center gap-3 text-tail">
      The pings could not be read: {message} <Button onClick={onRetry}>Try again</Button>
    </p>
  );
}
