"use client";

import { useLayoutEffect, useState, type RefObject } from "react";

export interface BoxSize {
  width: number;
  windowHeight: number;
  ratio: number;
}

/** Width of an element and height of the window in whole CSS pixels, and the pixel ratio it is drawn at; width 0 until measured. */
export function useBoxWidth(box: RefObject<HTMLElement | null>): BoxSize {
  const [size, setSize] = useState<BoxSize>({ width: 0, windowHeight: 900, ratio: 1 });
  useLayoutEffect(() => {
    const element = box.current;
    if (!element) return;
    const measure = () => {
      const next = { width: Math.floor(element.clientWidth), windowHeight: window.innerHeight, ratio: window.devicePixelRatio || 1 };
      setSize((now) => (now.width === next.width && now.windowHeight === next.windowHeight && now.ratio === next.ratio ? now : next));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    window.addEventListener("resize", measure);
    return () => {
      observer.disconnect();
      window.removeEventListener("resize", measure);
    };
  }, [box]);
  return size;
}
