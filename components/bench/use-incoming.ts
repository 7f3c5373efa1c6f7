"use client";

import { useEffect, useRef, useState } from "react";
import { useBenchCore, useBench } from "@/components/bench/bench-provider";
import { modeTarget } from "@/components/bench/mode-target";
import { sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { connectSimulated } from "@/components/bench/store/linking";
import { openReview } from "@/components/bench/store/review";
import { chooseScreenById } from "@/components/bench/store/screens";
import type { BenchTarget } from "@/components/bench/store/types";
import { modeName } from "@/lib/timing/mode-name";
import { rasterFromText } from "@/lib/timing/raster-text";

/** What the address asks of the bench: a simulated device, a profile to apply, a backup to restore, a mode to try. */
export type Incoming = {
  readonly simulated?: string | undefined;
  readonly apply?: string | undefined;
  readonly revision?: number | undefined;
  readonly restore?: string | undefined;
  /** A raster as `rasterToText` writes it, for the active slot. */
  readonly mode?: string | undefined;
  /** Whose limits the raster was made for; taken where no screen is chosen yet. */
  readonly screen?: string | undefined;
};

/** What waits for a device: said in a sentence meanwhile, and made into a plan's target once the device was read. */
type Wish = { readonly waiting: string; readonly target: (core: BenchCore) => BenchTarget | null };

const given = (target: BenchTarget) => () => target;

function wishForMode(text: string): Wish {
  const timing = rasterFromText(text);
  if (timing === undefined) throw new Error("The raster of the link is none.");
  return {
    waiting: `Connect a device to try ${modeName(timing)} on it.`,
    target: (core) => {
      const { reading, device } = core.store.getState();
      return reading && device ? modeTarget(timing, reading.activeSlot, device.limits) : null;
    },
  };
}

async function wishOf(core: BenchCore, incoming: Incoming): Promise<Wish | null> {
  const { server } = core.around;
  if (incoming.restore !== undefined) {
    const { id, name, content } = await server.backup(incoming.restore);
    return { waiting: `Connect the device to restore “${name}” to it.`, target: given({ kind: "restore", title: name, backupId: id, content }) };
  }
  if (incoming.mode !== undefined) return wishForMode(incoming.mode);
  if (incoming.apply === undefined) return null;
  const { title, revision: current } = await server.profile(incoming.apply);
  const { id, number, document } = incoming.revision === undefined ? current : await server.revision(incoming.apply, incoming.revision);
  return {
    waiting: `Connect a device to apply “${title}” to it.`,
    target: given({ kind: "profile", title, revisionId: id, revisionNumber: number, document, patches: [], isAltered: false }),
  };
}

/**
 * Does what the address asks, once the device was read.
 *
 * @returns a sentence while something still waits, else null
 */
export function useIncoming(incoming: Incoming): string | null {
  const core = useBenchCore();
  const hasReading = useBench((state) => state.reading !== null);
  const isIdle = useBench((state) => state.activity === "idle" && state.run === null);
  const [wish, setWish] = useState<Wish | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const begun = useRef(false);
  useEffect(() => {
    if (begun.current) return;
    begun.current = true;
    wishOf(core, incoming).then(setWish, (error: unknown) => setProblem(`What you wanted to put on the device can't be loaded: ${sentenceOf(error)}`));
    if (incoming.simulated !== undefined && core.line === null) void connectSimulated(core, incoming.simulated);
  }, [core, incoming]);
  useEffect(() => {
    if (!wish || !hasReading || !isIdle) return;
    const target = wish.target(core);
    if (target) openReview(core, target);
    // A screen that was chosen, or stated to be unknown, stays: it is the one that stands there.
    if (incoming.screen !== undefined && core.store.getState().screen.kind === "none") void chooseScreenById(core, incoming.screen);
    queueMicrotask(() => setWish(null));
  }, [core, wish, hasReading, isIdle, incoming]);
  if (problem !== null) return problem;
  return wish && !hasReading ? wish.waiting : null;
}
