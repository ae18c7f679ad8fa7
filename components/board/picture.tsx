"use client";

import { useState, type CSSProperties } from "react";
import { classNames } from "@/components/ui/class-names";

interface PictureProps {
  readonly src: string;
  /** Empty where a name stands beside it. */
  readonly alt: string;
  /** Pixels of the file for each CSS pixel. */
  readonly density?: number;
  readonly widthPx?: number;
  readonly heightPx?: number;
  readonly className?: string;
  readonly style?: CSSProperties;
}

/** A picture from the server; says so in words where it cannot be shown. */
export function Picture({ src, alt, density = 1, widthPx, heightPx, className, style }: PictureProps) {
  const [failedSrc, setFailedSrc] = useState<string | null>(null);
  if (failedSrc === src) {
    return (
      <span
        style={{ width: widthPx, height: heightPx }}
        className="flex items-center justify-center bg-paper p-1 text-center text-sm text-quiet"
      >
        No picture yet
      </span>
    );
  }
  return (
    // eslint-disable-next-line @next/next/no-img-element -- the server already sends it at the size it is shown
    <img
      src={src}
      srcSet={density === 1 ? undefined : `${src} ${density}x`}
      alt={alt}
      width={widthPx}
      height={heightPx}
      loading="lazy"
      decoding="async"
      draggable={false}
      onError={() => setFailedSrc(src)}
      className={classNames("max-w-none", className)}
      style={style}
    />
  );
}
