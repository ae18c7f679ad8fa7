"use client";

import { useLayoutEffect, useRef } from "react";
import { gesturePath, type Box } from "@/lib/board/gesture-path";

interface QuestionGestureProps {
  readonly frameId: string;
  /** The tile where it may belong, px of the sheet. */
  readonly tile: Box;
}

/**
 * The open question drawn on the board: a dashed line from its frame on the bench to the tile where it may belong.
 * It lies in what scrolls, so it needs no drawing anew while scrolling; where the frame is not laid out, it is not
 * drawn. For eyes alone: the docket says the same.
 */
export function QuestionGesture({ frameId, tile }: QuestionGestureProps) {
  const svg = useRef<SVGSVGElement>(null);
  // After every drawing of the sheet: benches unfold and wrap without telling.
  useLayoutEffect(() => {
    const frame = svg.current && findFrame(svg.current, frameId);
    const path = frame ? gesturePath(frame, tile) : { line: "", head: "" };
    for (const element of svg.current?.querySelectorAll("path") ?? []) {
      element.setAttribute("d", element.dataset.part === "head" ? path.head : path.line);
    }
  });
  return (
    <svg
      ref={svg}
      aria-hidden
      data-gesture
      fill="none"
      className="pointer-events-none absolute inset-0 z-30 size-full overflow-visible"
    >
      {/* Paper beneath, so that it is seen on the well, on pictures and on paper alike. */}
      <path stroke="var(--paper)" strokeWidth="6" />
      <path stroke="var(--paper)" strokeWidth="6" strokeLinecap="square" data-part="head" />
      <path stroke="var(--ochre)" strokeWidth="2.5" strokeDasharray="8 5" />
      <path stroke="var(--ochre)" strokeWidth="2.5" strokeLinecap="square" data-part="head" />
    </svg>
  );
}

function findFrame(svg: SVGSVGElement, frameId: string): Box | null {
  const sheet = svg.parentElement;
  const frame = sheet?.querySelector(`[data-frame="${CSS.escape(frameId)}"]`);
  if (!sheet || !frame) return null;
  const origin = sheet.getBoundingClientRect();
  const box = frame.getBoundingClientRect();
  return { left: box.left - origin.left, top: box.top - origin.top, width: box.width, height: box.height };
}
