"use client";

import { useEffect, useState } from "react";
import { useBenchCore } from "@/components/bench/bench-provider";
import { wireLines, type WireLine } from "@/components/bench/wire-lines";

/** The log is drawn at most this often, however fast the wire is. */
const DRAW_MS = 120;

/** The last lines of the wire log, redrawn while bytes flow. */
export function useWireLines(filter: string, most: number): { readonly lines: readonly WireLine[]; readonly total: number } {
  const { wireLog } = useBenchCore();
  const [revision, setRevision] = useState(0);
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | null = null;
    const stop = wireLog.onEntry(() => {
      timer ??= setTimeout(() => { timer = null; setRevision((one) => one + 1); }, DRAW_MS);
    });
    return () => { stop(); if (timer !== null) clearTimeout(timer); };
  }, [wireLog]);
  // `revision` is what makes a new reading of the ring due.
  return { lines: revision < 0 ? [] : wireLines(wireLog.entries(), filter, most), total: wireLog.exchangeCount };
}
