"use client";

import { useCallback, useEffect, useId, useLayoutEffect, useRef, useState, type ReactNode } from "react";

/** What is chosen comes before what could be. */
const FIRST_CONTROLS = ["input[type=radio]:checked", "input, select, button, a[href], [tabindex='0']"];

/** What a trigger needs to open its panel, and the panel to stand under it. */
export function usePopover() {
  const [isOpen, setOpen] = useState(false);
  const trigger = useRef<HTMLButtonElement>(null);
  const panel = useRef<HTMLDivElement>(null);
  const id = useId();

  const close = useCallback((giveFocusBack: boolean) => {
    setOpen(false);
    if (giveFocusBack) trigger.current?.focus();
  }, []);

  useEffect(() => {
    if (!isOpen) return;
    const [chosen, first] = FIRST_CONTROLS.map((selector) => panel.current?.querySelector<HTMLElement>(selector));
    (chosen ?? first)?.focus({ preventScroll: true });
    const onKey = (event: KeyboardEvent) => {
      if (event.key === "Escape") close(true);
    };
    const onPointer = (event: PointerEvent) => {
      const target = event.target as Node;
      if (!panel.current?.contains(target) && !trigger.current?.contains(target)) close(false);
    };
    document.addEventListener("keydown", onKey);
    document.addEventListener("pointerdown", onPointer);
    return () => {
      document.removeEventListener("keydown", onKey);
      document.removeEventListener("pointerdown", onPointer);
    };
  }, [isOpen, close]);

  useLayoutEffect(() => {
    if (isOpen && panel.current) keepInView(panel.current);
  }, [isOpen]);

  return { isOpen, setOpen, close, trigger, panel, id };
}

/** Moves the panel left where it would leave the window; it hangs from its trigger otherwise. */
function keepInView(panel: HTMLElement): void {
  panel.style.translate = "none";
  const box = panel.getBoundingClientRect();
  const room = document.documentElement.clientWidth - 12;
  const shift = Math.max(12 - box.left, Math.min(0, room - box.right));
  panel.style.translate = `${shift}px 0`;
}

export function PopoverPanel(props: { popover: ReturnType<typeof usePopover>; label: string; children: ReactNode; align?: "left" | "right" }) {
  const { isOpen, close, panel, id } = props.popover;
  if (!isOpen) return null;
  return (
    <div
      ref={panel}
      id={id}
      role="dialog"
      aria-label={props.label}
      onBlur={(event) => {
        // Tabbing out closes; a click inside on something that takes no focus does not.
        if (event.relatedTarget && !event.currentTarget.contains(event.relatedTarget)) close(false);
      }}
      className={`absolute top-full z-30 mt-1.5 w-max max-w-[min(24rem,calc(100vw-24px))] border border-ink bg-sheet p-3.5 text-left font-text text-base font-normal text-ink ${props.align === "right" ? "right-0" : "left-0"}`}
    >
      {props.children}
    </div>
  );
}
