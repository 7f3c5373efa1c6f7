"use client";

import { useEffect, useRef, useState } from "react";
import { useBenchCore, useBench } from "@/components/bench/bench-provider";
import { sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { connectSimulated } from "@/components/bench/store/linking";
import { openReview } from "@/components/bench/store/review";
import type { BenchTarget } from "@/components/bench/store/types";

/** What the address asks of the bench: a simulated device, a profile to apply, a backup to restore. */
export type Incoming = {
  readonly simulated?: string | undefined;
  readonly apply?: string | undefined;
  readonly revision?: number | undefined;
  readonly restore?: string | undefined;
};

async function targetOf(core: BenchCore, incoming: Incoming): Promise<BenchTarget | null> {
  const { server } = core.around;
  if (incoming.restore !== undefined) {
    const backup = await server.backup(incoming.restore);
    return { kind: "restore", title: backup.name, backupId: backup.id, content: backup.content };
  }
  if (incoming.apply === undefined) return null;
  const profile = await server.profile(incoming.apply);
  const revision = incoming.revision === undefined ? profile.revision : await server.revision(incoming.apply, incoming.revision);
  return { kind: "profile", title: profile.title, revisionId: revision.id, revisionNumber: revision.number, document: revision.document, patches: [], isAltered: false };
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
  const [target, setTarget] = useState<BenchTarget | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const begun = useRef(false);
  useEffect(() => {
    if (begun.current) return;
    begun.current = true;
    targetOf(core, incoming).then(setTarget, (error: unknown) => setProblem(`What you wanted to apply can't be loaded: ${sentenceOf(error)}`));
    if (incoming.simulated !== undefined && core.line === null) void connectSimulated(core, incoming.simulated);
  }, [core, incoming]);
  useEffect(() => {
    if (!target || !hasReading || !isIdle) return;
    openReview(core, target);
    queueMicrotask(() => setTarget(null));
  }, [core, target, hasReading, isIdle]);
  if (problem !== null) return problem;
  if (!target || hasReading) return null;
  return target.kind === "restore" ? `Connect the device to restore “${target.title}” to it.` : `Connect a device to apply “${target.kind === "profile" ? target.title : ""}” to it.`;
}
