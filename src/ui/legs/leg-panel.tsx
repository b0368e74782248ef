"use client";

import type { LegCheckView, LegOfCheck } from "@/domain/leg-check";
import { Button } from "@/ui/primitives/button";
import { EditForm } from "./edit-form";
import type { LegActions } from "./leg-actions";
import { LegFacts } from "./leg-facts";
import { MergeForm } from "./merge-form";
import type { Drawing } from "./use-drawing";

interface Props {
  view: LegCheckView;
  leg: LegOfCheck;
  actions: LegActions;
  mayEdit: boolean;
  shiftM: number;
  isTooShort: boolean;
  onShift: (shiftM: number) => void;
  onDraw: (drawing: Drawing) => void;
  onSaved: () => Promise<void>;
}

/** The selected leg: facts and doubts for everyone, the forms for those who may change it. */
export function LegPanel({ view, leg, actions, mayEdit, shiftM, isTooShort, onShift, onDraw, onSaved }: Props) {
  const others = view.legs.filter((other) => other.id !== leg.id);
  return (
    <section aria-label={`Leg ${leg.name}`} className="flex flex-col gap-4 border-t border-ink pt-4">
      <h2 className="text-lg">Leg {leg.name}</h2>
      <LegFacts leg={leg} movements={view.movements} exits={view.exits} />
      {mayEdit ? (
        <>
          <EditForm leg={leg} edit={actions.edit} shiftM={shiftM} isTooShort={isTooShort} onShift={onShift} onSaved={onSaved} />
          <details className="border-t border-rule pt-3">
            <summary className="cursor-pointer font-medium">Merge or split</summary>
            <div className="mt-3 flex flex-col gap-5">
              {others.length > 0 ? <MergeForm leg={leg} others={others} merge={actions.merge} onSaved={onSaved} /> : null}
              <div className="flex flex-col items-start gap-2">
                <p>Two streets were taken for one: draw both.</p>
                <Button onClick={() => onDraw({ kind: "split", legId: leg.id })}>Split the leg</Button>
              </div>
            </div>
          </details>
        </>
      ) : (
        <p className="text-ink-soft">An engineer can change the leg.</p>
      )}
    </section>
  );
}
