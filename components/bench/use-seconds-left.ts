"use client";

import { useEffect, useState } from "react";

/** Often enough that no second is skipped; a hidden tab slows it, and the end is judged by the run's own clock. */
const TICK_MS = 200;

/** Seconds until a moment of the page's monotonic clock, never below 0. */
export function useSecondsLeft(endsAtMs: number): number {
  const [nowMs, setNowMs] = useState(() => performance.now());
  useEffect(() => {
    const timer = setInterval(() => setNowMs(performance.now()), TICK_MS);
    return () => clearInterval(timer);
  }, []);
  return Math.max(0, (endsAtMs - nowMs) / 1000);
}
