"use client";

import { useCallback, useEffect, useState, type CSSProperties } from "react";
import { classNames } from "@/components/ui/class-names";
import { useOnline } from "@/components/ui/use-online";

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

/** A picture from the server; where it cannot be shown it says so in words, and is asked for again. */
export function Picture({ src, alt, density = 1, widthPx, heightPx, className, style }: PictureProps) {
  const [failedSrc, setFailedSrc] = useState<string | null>(null);
  const showAgain = useCallback(() => setFailedSrc(null), []);
  if (failedSrc === src) {
    return <NoPicture key={src} src={src} widthPx={widthPx} heightPx={heightPx} onThere={showAgain} />;
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

interface NoPictureProps extends Pick<PictureProps, "src" | "widthPx" | "heightPx"> {
  readonly onThere: () => void;
}

function NoPicture({ src, widthPx, heightPx, onThere }: NoPictureProps) {
  const isOnline = useOnline();
  useAskingAgain(src, isOnline, onThere);
  return (
    <span
      style={{ width: widthPx, height: heightPx }}
      className="flex items-center justify-center bg-paper p-1 text-center text-sm text-quiet"
    >
      {isOnline ? "No picture yet" : "No connection"}
    </span>
  );
}

/** Waits between two requests for a picture, ms: each twice the one before. */
const FIRST_WAIT_MS = 1_500;
const LONGEST_WAIT_MS = 60_000;

/** Asks for a picture beside the page until it is there; with the connection back, at once. */
function useAskingAgain(src: string, isOnline: boolean, onThere: () => void): void {
  const [tries, setTries] = useState(0);
  useEffect(() => {
    if (!isOnline) return;
    const image = new Image();
    image.onload = onThere;
    image.onerror = () => setTries(tries + 1);
    const ask = () => {
      image.src = src;
    };
    const timer = setTimeout(ask, Math.min(FIRST_WAIT_MS * 2 ** tries, LONGEST_WAIT_MS));
    // The browser can say "online" a moment before anything answers: the wait above asks once more.
    window.addEventListener("online", ask);
    return () => {
      clearTimeout(timer);
      window.removeEventListener("online", ask);
      image.onload = image.onerror = null;
    };
  }, [src, isOnline, tries, onThere]);
}
