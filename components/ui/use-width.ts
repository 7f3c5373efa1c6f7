"use client";

import { useCallback, useState } from "react";

/** The width of an element as it is laid out, in whole CSS px; `initial` until it was measured. */
export function useWidth(initial: number): readonly [(element: Element | null) => (() => void) | undefined, number] {
  const [width, setWidth] = useState(initial);
  const attach = useCallback((element: Element | null) => {
    if (element === null) return undefined;
    const observer = new ResizeObserver((entries) => {
      const box = entries[0]?.contentRect;
      if (box !== undefined && box.width > 0) setWidth(Math.floor(box.width));
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [attach, width];
}
