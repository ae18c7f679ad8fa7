"use client";

import { useDroppable } from "@dnd-kit/core";
import type { CSSProperties, ReactNode } from "react";

interface DropAreaProps {
  /** "well" or "rail". */
  readonly id: string;
  readonly style: CSSProperties;
  readonly children: ReactNode;
}

/** What scrolls when something is dragged to its edge; the places within are found by themselves. */
export function DropArea({ id, style, children }: DropAreaProps) {
  const { setNodeRef } = useDroppable({ id });
  return (
    <div ref={setNodeRef} className="relative" style={style}>
      {children}
    </div>
  );
}
