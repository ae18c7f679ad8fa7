"use client";

import { useCallback, useEffect, useRef, useState } from "react";

/** Longer than the second press of a double-click takes. Source: 500 ms, common practice of desktops, from memory. */
const REST_MS = 600;

interface Rest {
  /** Nothing takes a press now. */
  readonly isResting: boolean;
  /** The same at the moment of a press, which may come before anything was drawn anew. */
  readonly isRestingNow: () => boolean;
  readonly rest: () => void;
}

/** A moment in which what has just been put before a person takes no press that was meant for what stood there before. */
export function useRest(): Rest {
  const [isResting, setIsResting] = useState(false);
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null);
  const stop = useCallback(() => {
    if (timer.current !== null) clearTimeout(timer.current);
    timer.current = null;
  }, []);
  useEffect(() => stop, [stop]);
  const rest = () => {
    stop();
    timer.current = setTimeout(() => {
      timer.current = null;
      setIsResting(false);
    }, REST_MS);
    setIsResting(true);
  };
  return { isResting, isRestingNow: () => timer.current !== null, rest };
}
