"use client";

import { useCallback, useState } from "react";

/** Inner size of an element, px, kept up to date; null until it is laid out. */
export function useElementSize(): [(element: HTMLElement | null) => void, { width: number; height: number } | null] {
  const [size, setSize] = useState<{ width: number; height: number } | null>(null);
  const ref = useCallback((element: HTMLElement | null) => {
    if (!element) return;
    const measure = () => {
      const next = { width: element.clientWidth, height: element.clientHeight };
      setSize((now) => (now && now.width === next.width && now.height === next.height ? now : next));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [ref, size];
}
