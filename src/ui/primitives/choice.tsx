"use client";

import { useId, type ReactNode } from "react";

export interface Choice<T extends string> {
  value: T;
  label: string;
  note?: string;
}

/**
 * One of a few, chosen at once. Arrow keys try the choices out; Enter or a click settles it.
 */
export function ChoiceList<T extends string>(props: {
  legend: string;
  choices: readonly Choice<T>[];
  value: T | null;
  onChoose: (value: T) => void;
  onSettle?: () => void;
  /** A click only chooses: there are other fields to fill in beside the list. */
  staysOpen?: boolean;
  children?: ReactNode;
}) {
  const name = useId();
  return (
    <fieldset className="min-w-44">
      <legend className="mb-1.5 text-sm text-ink-soft">{props.legend}</legend>
      <div className="flex max-h-80 flex-col overflow-y-auto">
        {props.choices.map((choice) => (
          <label key={choice.value} className="flex min-h-8 cursor-pointer items-baseline gap-2.5 px-1 py-1 leading-tight hover:bg-paper">
            <input
              type="radio"
              name={name}
              className="relative top-0.5 size-4 shrink-0 accent-pick"
              value={choice.value}
              checked={props.value === choice.value}
              onChange={() => props.onChoose(choice.value)}
              onClick={(event) => event.detail > 0 && !props.staysOpen && props.onSettle?.()}
              onKeyDown={(event) => event.key === "Enter" && props.onSettle?.()}
            />
            <span>
              {choice.label}
              {choice.note ? <span className="ml-2 text-sm text-ink-soft">{choice.note}</span> : null}
            </span>
          </label>
        ))}
      </div>
      {props.children}
    </fieldset>
  );
}
