"use client";

import { useLayoutEffect, useState, type RefObject } from "react";

export interface BoxSize {
  width: number;
  height: number;
  /** Pixels of the screen for one of CSS. */
  ratio: number;
}

/** Size of an element that this component draws, in CSS pixels; 0 until measured. */
export function useBoxSize(box: RefObject<HTMLElement | null>): BoxSize {
  const [size, setSize] = useState<BoxSize>({ width: 0, height: 0, ratio: 1 });
  useLayoutEffect(() => {
    const element = box.current;
    if (!element) return;
    const measure = () => {
      const next = { width: element.clientWidth, height: element.clientHeight, ratio: window.devicePixelRatio || 1 };
      setSize((now) => (now.width === next.width && now.height === next.height && now.ratio === next.ratio ? now : next));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, [box]);
  return size;
}
