import { createStore, type StoreApi } from "zustand/vanilla";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { SerialLike, SerialPortLike } from "@/lib/serial/port";
import type { Run } from "@/lib/serial/run/create-run";
import type { DeviceSession } from "@/lib/serial/session/types";
import type { SimulatedDevice } from "@/components/bench/store/simulated-device";
import type { BenchServer } from "@/components/bench/store/bench-server";
import { createWireLog, type WireLog } from "@/lib/serial/wire-log";
import { createWireView, type WireView } from "@/components/bench/wire-view";
import type { BenchState } from "@/components/bench/store/types";

export type BenchAccount = { readonly id: string; readonly name: string; readonly role: string };

/** What the bench stands on; tests put in a virtual clock and a storage of their own. */
export type BenchSurroundings = {
  readonly clock: Clock;
  readonly account: BenchAccount | null;
  readonly server: BenchServer;
  readonly storage: Storage;
  /** `navigator.serial`; absent where the browser has none. */
  readonly serial: SerialLike | undefined;
  readonly locks: LockManager | undefined;
  /** Names this tab as the holder of a run. */
  readonly tabId: string;
};

/** The live link and what hangs on it: not for rendering, so it stands beside the state. */
export type BenchLine = {
  driver: CompiledDriver;
  port: SerialPortLike;
  session: DeviceSession;
  simulated: SimulatedDevice | null;
};

/** The one store of a mounted bench, and the few things that its actions share. */
export type BenchCore = {
  readonly store: StoreApi<BenchState>;
  readonly around: BenchSurroundings;
  /** What went over the wire, over all sessions of this bench. */
  readonly wireLog: WireLog;
  /** What the drawer shows of it. */
  readonly wireView: WireView;
  line: BenchLine | null;
  /** Stops what reads or recalls now. */
  abort: AbortController | null;
  run: Run | null;
  /** Lets go of the lock that keeps other tabs from this run. */
  releaseHold: (() => void) | null;
};

export const EMPTY_BENCH: BenchState = {
  link: { name: "none" }, activity: "idle", device: null, reading: null, progress: null, backup: null,
  screen: { kind: "none" }, edits: [], nativeEdits: [], review: null, run: null, faults: [], heldRecall: null, notice: null, nowMs: 0,
};

export function createBenchCore(around: BenchSurroundings): BenchCore {
  const wireLog = createWireLog({ clock: around.clock });
  return {
    store: createStore<BenchState>(() => ({ ...EMPTY_BENCH, nowMs: around.clock.wallMs() })),
    around, wireLog, wireView: createWireView(wireLog, around.clock), line: null, abort: null, run: null, releaseHold: null,
  };
}

/** Says something at the head of the bench. */
export function say(core: BenchCore, tone: "plain" | "halt" | "ok", text: string): void {
  core.store.setState({ notice: { tone, text } });
}

/** A sentence for what went wrong with a call of the server or the line. */
export function sentenceOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}
