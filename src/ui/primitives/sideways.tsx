"use client";

import { useEffect, useRef, useState, type ReactNode } from "react";

/** A box that scrolls sideways inside itself, and says so as long as there is more to the right. */
export function Sideways({ label, children }: { label: string; children: ReactNode }) {
  const box = useRef<HTMLDivElement>(null);
  const [hasMore, setHasMore] = useState(false);

  useEffect(() => {
    const element = box.current;
    if (!element) return;
    const look = () => setHasMore(element.scrollLeft + element.clientWidth < element.scrollWidth - 2);
    const observer = new ResizeObserver(look);
    observer.observe(element);
    if (element.firstElementChild) observer.observe(element.firstElementChild);
    element.addEventListener("scroll", look, { passive: true });
    return () => {
      observer.disconnect();
      element.removeEventListener("scroll", look);
    };
  }, []);

  return (
    <div>
      {/* Says what the eye misses; who listens gets all columns anyway. */}
      <p aria-hidden="true" className={hasMore ? "mb-1 flex items-center justify-end gap-1.5 text-sm text-ink-soft" : "hidden"}>
        more columns
        <svg width="22" height="10" viewBox="0 0 22 10" fill="none" stroke="#16213A" strokeWidth="1.5">
          <path d="M0 5h20M16 1l4 4-4 4" />
        </svg>
      </p>
      <div ref={box} className={hasMore ? "relative overflow-x-auto border-r-2 border-ink" : "relative overflow-x-auto"} tabIndex={0} role="region" aria-label={label}>
        {children}
      </div>
    </div>
  );
}
