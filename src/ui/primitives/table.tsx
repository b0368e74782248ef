import type { ReactNode, TdHTMLAttributes, ThHTMLAttributes } from "react";
import { classNames } from "./class-names";
import { Sideways } from "./sideways";

/** A ruled table that scrolls sideways inside itself where the window is narrow. `caption` is read out, and shown on request. */
export function RuledTable({ caption, showCaption = false, children, className }: { caption: string; showCaption?: boolean; children: ReactNode; className?: string }) {
  return (
    <Sideways label={caption}>
      <table className={classNames("w-full border-collapse text-[0.97rem] leading-snug", className)}>
        <caption className={showCaption ? "pb-2 text-left font-semibold" : "sr-only"}>{caption}</caption>
        {children}
      </table>
    </Sideways>
  );
}

/** Of a cell that stays in sight while the others scroll away under it. */
export const STAYS = "sticky left-0 bg-sheet";

export function Th({ numeric, className, scope = "col", ...rest }: ThHTMLAttributes<HTMLTableCellElement> & { numeric?: boolean }) {
  return <th scope={scope} className={classNames("border-b border-ink px-2 pb-1.5 align-bottom text-sm font-normal leading-tight text-ink-soft", numeric ? "text-right" : "text-left", className)} {...rest} />;
}

export function Td({ numeric, className, ...rest }: TdHTMLAttributes<HTMLTableCellElement> & { numeric?: boolean }) {
  return <td className={classNames("border-b border-rule px-2 py-2 align-top", numeric ? "text-right tabular-nums" : "text-left", className)} {...rest} />;
}

export interface SortButtonProps {
  label: ReactNode;
  dir: "asc" | "desc" | null;
  onSort: () => void;
  numeric?: boolean;
}

/** The mark hangs in the gap to the right, so that figures and heads stay in line. */
export function SortButton({ label, dir, onSort, numeric }: SortButtonProps) {
  return (
    <button type="button" onClick={onSort} className={classNames("relative inline-flex min-h-6 items-end leading-tight hover:text-ink", numeric ? "text-right" : "text-left", dir && "font-semibold text-ink")}>
      <span>{label}</span>
      {dir ? <SortMark dir={dir} /> : null}
    </button>
  );
}

function SortMark({ dir }: { dir: "asc" | "desc" }) {
  return (
    <svg aria-hidden="true" width="7" height="12" viewBox="0 0 7 12" className="absolute -right-2 bottom-0.5">
      <path d={dir === "asc" ? "M3.5 1v10M.8 4 3.5 1l2.7 3" : "M3.5 1v10M.8 8l2.7 3 2.7-3"} fill="none" stroke="#C43E1C" strokeWidth="1.5" />
    </svg>
  );
}
