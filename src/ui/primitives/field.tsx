import { useId, type InputHTMLAttributes, type ReactNode, type SelectHTMLAttributes } from "react";
import { classNames } from "./class-names";

const BOX =
  "min-h-9 w-full border border-ink-soft/70 bg-sheet px-2.5 py-1.5 text-base leading-tight placeholder:text-ink-soft aria-[invalid=true]:border-tail aria-[invalid=true]:border-2 disabled:opacity-60";

interface Told {
  id: string;
  "aria-describedby"?: string;
  "aria-invalid"?: true;
}

/** Label above, control, then what it means or what is wrong with it; `children` gets the ids that tie them together. */
export function Field(props: { label: string; hint?: ReactNode; error?: string | string[]; className?: string; children: (told: Told) => ReactNode }) {
  const id = useId();
  const error = Array.isArray(props.error) ? props.error[0] : props.error;
  const describedBy = [props.hint && `${id}-hint`, error && `${id}-error`].filter(Boolean).join(" ");
  const told: Told = { id, "aria-describedby": describedBy || undefined, "aria-invalid": error ? true : undefined };
  return (
    <div className={classNames("flex flex-col gap-1", props.className)}>
      <label htmlFor={id} className="text-sm font-medium">
        {props.label}
      </label>
      {props.children(told)}
      {props.hint ? (
        <p id={`${id}-hint`} className="text-sm text-ink-soft">
          {props.hint}
        </p>
      ) : null}
      {error ? (
        <p id={`${id}-error`} className="text-sm font-medium text-tail">
          {error}
        </p>
      ) : null}
    </div>
  );
}

export function Input({ className, ...rest }: InputHTMLAttributes<HTMLInputElement>) {
  return <input className={classNames(BOX, className)} {...rest} />;
}

export function Select({ className, ...rest }: SelectHTMLAttributes<HTMLSelectElement>) {
  return <select className={classNames(BOX, "pr-8", className)} {...rest} />;
}
