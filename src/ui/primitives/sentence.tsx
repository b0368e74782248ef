"use client";

import type { ReactNode } from "react";
import { PopoverPanel, usePopover } from "./popover";

/** The line that says in plain words what is shown. Text and `SentenceControl`s, nothing else. */
export function Sentence({ children, label }: { children: ReactNode; label: string }) {
  return (
    <section aria-label={label} className="text-[1.2rem] leading-[1.75] text-ink-soft sm:text-[1.3rem]">
      {children}
    </section>
  );
}

/** An underlined phrase; the control for it opens where it stands. `children` may close it by the function it gets. */
export function SentenceControl(props: { name: string; phrase: string; children: (close: () => void) => ReactNode }) {
  const popover = usePopover();
  return (
    <span className="relative inline-block align-baseline text-ink">
      <button
        ref={popover.trigger}
        type="button"
        className="phrase"
        aria-haspopup="dialog"
        aria-expanded={popover.isOpen}
        aria-controls={popover.isOpen ? popover.id : undefined}
        onClick={() => popover.setOpen(!popover.isOpen)}
      >
        <span className="sr-only">{props.name}: </span>
        {props.phrase}
      </button>
      <PopoverPanel popover={popover} label={props.name}>
        {props.children(() => popover.close(true))}
      </PopoverPanel>
    </span>
  );
}
