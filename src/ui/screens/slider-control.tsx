"use client";

import { useId } from "react";
import { SentenceControl } from "@/ui/primitives/sentence";

/** A phrase with a number in it: a slider that works while it is dragged, and a box for who knows the number. */
export function SliderControl(props: {
  name: string;
  phrase: string;
  label: string;
  unit: string;
  /** End of the slider; the box takes numbers up to `limit`. */
  max: number;
  limit: number;
  value: number;
  onChange: (value: number) => void;
}) {
  const id = useId();
  const set = (text: string) => {
    const value = Number(text);
    if (Number.isFinite(value) && value >= 0) props.onChange(Math.min(value, props.limit));
  };
  return (
    <SentenceControl name={props.name} phrase={props.phrase}>
      {(close) => (
        <div className="flex w-72 max-w-full flex-col gap-2">
          <label htmlFor={id} className="text-sm text-ink-soft">
            {props.label}
          </label>
          <input
            id={id}
            type="range"
            className="slider"
            min={0}
            max={props.max}
            step={1}
            value={Math.min(props.value, props.max)}
            aria-valuetext={`${props.value} ${props.unit}`}
            onChange={(event) => set(event.target.value)}
            onKeyDown={(event) => event.key === "Enter" && close()}
          />
          <div className="flex items-center gap-2">
            <input
              type="number"
              aria-label={`${props.label}, as a number`}
              className="min-h-9 w-20 border border-ink-soft/70 bg-sheet px-2 text-right tabular-nums"
              min={0}
              step={1}
              value={props.value}
              onChange={(event) => set(event.target.value)}
              onKeyDown={(event) => event.key === "Enter" && close()}
            />
            <span>{props.unit}</span>
            {props.value > 0 ? (
              <button type="button" className="text-link ml-auto min-h-6 text-sm" onClick={() => props.onChange(0)}>
                No minimum
              </button>
            ) : null}
          </div>
        </div>
      )}
    </SentenceControl>
  );
}
