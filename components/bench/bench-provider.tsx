"use client";

import { createContext, useContext, useEffect, useState, type ReactNode } from "react";
import { useStore } from "zustand";
import { useProvideLink, type LinkState as LampState } from "@/components/shell/link-state";
import { createRealClock } from "@/lib/serial/clock/real-clock";
import { FINAL_RUN_STATES } from "@/lib/serial/run/types";
import type { SerialLike } from "@/lib/serial/port";
import { benchServer } from "@/components/bench/store/bench-server";
import { createBenchActions, type BenchActions } from "@/components/bench/store/bench-actions";
import { createBenchCore, type BenchAccount, type BenchCore } from "@/components/bench/store/bench-core";
import type { BenchState } from "@/components/bench/store/types";

type Bench = { readonly core: BenchCore; readonly actions: BenchActions };

const BenchContext = createContext<Bench | null>(null);
const MINUTE_MS = 60_000;

function createBench(account: BenchAccount | null): Bench {
  const core = createBenchCore({
    clock: createRealClock(), account, server: benchServer, storage: localStorage,
    // The W3C interface fits ours by structure; its DOM types are wider than what we use.
    serial: "serial" in navigator ? (navigator.serial as unknown as SerialLike) : undefined,
    locks: "locks" in navigator ? navigator.locks : undefined,
    tabId: crypto.randomUUID(),
  });
  return { core, actions: createBenchActions(core) };
}

/**
 * Holds the one live link of this tab, over all pages of the console: the cable stays plugged in while its owner looks
 * through the library.
 */
export function BenchProvider({ account, children }: { readonly account: BenchAccount | null; readonly children: ReactNode }) {
  const [bench, setBench] = useState<Bench | null>(null);
  const { id = null, name = "", role = "" } = account ?? {};
  useEffect(() => {
    // Ports, storage and locks are the browser's: the bench begins after hydration.
    const made = createBench(id === null ? null : { id, name, role });
    queueMicrotask(() => setBench(made));
    return () => { void made.actions.disconnect(); };
  }, [id, name, role]);
  return (
    <BenchContext.Provider value={bench}>
      {bench ? <BenchDuties bench={bench} /> : null}
      {children}
    </BenchContext.Provider>
  );
}

function lampOf(state: BenchState): { readonly state: LampState; readonly text: string } {
  const run = state.run?.view.state;
  const name = state.device ? `${state.device.identity.maker} ${state.device.identity.model}` : "";
  if (state.link.name === "lost") return { state: "trouble", text: `${name} is out of reach` };
  if (run === "mixed" || run === "unconfirmed") return { state: "trouble", text: `${name}: a run needs you` };
  if (run !== undefined && !FINAL_RUN_STATES.includes(run)) return { state: "breathing", text: `${name}: a trial runs` };
  return state.link.name === "ready" ? { state: "lit", text: `${name} connected` } : { state: "dark", text: "No device connected" };
}

/** What the bench owes the rest of the page: the lamp, a moving clock, and a word before the tab closes on a run. */
function BenchDuties({ bench }: { readonly bench: Bench }) {
  const { store } = bench.core;
  const lampState = useStore(store, (state) => lampOf(state).state);
  const lampText = useStore(store, (state) => lampOf(state).text);
  const isOpen = useStore(store, (state) => state.activity === "running" || state.activity === "backing-up");
  useProvideLink(lampState, lampText);
  useEffect(() => {
    const timer = setInterval(() => store.setState({ nowMs: Date.now() }), MINUTE_MS);
    return () => clearInterval(timer);
  }, [store]);
  useEffect(() => {
    if (!isOpen) return undefined;
    const guard = (event: BeforeUnloadEvent) => event.preventDefault();
    addEventListener("beforeunload", guard);
    return () => removeEventListener("beforeunload", guard);
  }, [isOpen]);
  return null;
}

function useBenchOf(): Bench {
  const bench = useContext(BenchContext);
  if (bench === null) throw new Error("The bench is used outside BenchProvider");
  return bench;
}

/** Whether the bench is there yet: not before the page runs in a browser. */
export function useHasBench(): boolean {
  return useContext(BenchContext) !== null;
}

/** A part of the bench's state. */
export function useBench<T>(select: (state: BenchState) => T): T {
  return useStore(useBenchOf().core.store, select);
}

export function useBenchActions(): BenchActions {
  return useBenchOf().actions;
}

export function useBenchAccount(): BenchAccount | null {
  return useBenchOf().core.around.account;
}

export function useBenchCore(): BenchCore {
  return useBenchOf().core;
}

/** Nothing is under way and the device is there: what writes may be pressed. */
export function useSettled(): boolean {
  return useBench((state) => state.activity === "idle" && state.link.name === "ready");
}
