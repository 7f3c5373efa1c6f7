import { createStore, type StoreApi } from "zustand/vanilla";
import { portFailureOf } from "@/components/bench/port-help";
import type { PortFailure } from "@/components/bench/port-help";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { SerialOpenOptions, SerialPortLike } from "@/lib/serial/port";
import type { Recording } from "@/lib/serial/recording";
import type { ReplayDevice } from "@/lib/serial/replay/replay-device";
import { createReplayPort } from "@/lib/serial/replay/replay-port";
import { createLink } from "@/lib/serial/session/link";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceIdentity, DeviceSession, ReadProgress } from "@/lib/serial/session/types";
import { createWireLog, type WireEntry, type WireLog } from "@/lib/serial/wire-log";

/** What a session that only reads may do: nothing that writes, recalls, stores, mutes or sets a timer is there to be called. */
export type ReadOnlySession = Pick<DeviceSession, "state" | "onState" | "readWhole" | "close">;

/** Who is on the line, as far as anybody said. */
export type ListenLine =
  | { readonly kind: "driver"; readonly driver: CompiledDriver; readonly identity: DeviceIdentity }
  | { readonly kind: "raw" };

export type ListenState = {
  readonly link: "none" | "opening" | "listening" | "lost";
  readonly line: ListenLine | null;
  readonly failure: PortFailure | null;
  readonly progress: ReadProgress | null;
  /** What happened last, in a sentence. */
  readonly said: string;
  readonly entries: readonly WireEntry[];
};

export type ListenCore = {
  readonly store: StoreApi<ListenState>;
  readonly wireLog: WireLog;
  /** Opens a port with a driver, asks who is there, and reads everything. */
  readWith(port: SerialPortLike, driver: CompiledDriver): Promise<void>;
  /** Plays a recording as the device, to a driver that reads everything. */
  replay(recording: Recording, driver: CompiledDriver): Promise<void>;
  /** Opens a port without a driver: what comes is kept, and nothing leaves but what `send` is given. */
  listenRaw(port: SerialPortLike, options: SerialOpenOptions): Promise<void>;
  /** Puts bytes on a raw line. Errors: a sentence. */
  send(bytes: Uint8Array): Result<null, string>;
  readAgain(): Promise<void>;
  stop(): Promise<void>;
};

/** The log is drawn at most this often. */
const DRAW_MS = 150;
const BUFFER_BYTES = 16_384;

type Live = { readonly session: ReadOnlySession | null; readonly send: ((bytes: Uint8Array) => void) | null; close(): Promise<void> };

const EMPTY: ListenState = { link: "none", line: null, failure: null, progress: null, said: "", entries: [] };

/** Where a driver parted from a recording that was played to it. */
function replayWords({ outcome, exchangesDone }: ReplayDevice): string {
  if (outcome.kind !== "differs") return `The recording went along with the driver for ${exchangesDone} exchanges.`;
  const { exchange, line, offset, expected, got } = outcome.difference;
  const byte = (value: number | null) => (value === null ? "nothing" : value.toString(16).toUpperCase().padStart(2, "0"));
  return `The recording ends the line in exchange ${exchange}, line ${line}, byte ${offset}: expected ${byte(expected)}, got ${byte(got)}.`;
}

/** A line that is read and recorded and never written to through a driver. One for a mounted page. */
export function createListenCore(clock: Clock): ListenCore {
  const wireLog = createWireLog({ clock });
  const store = createStore<ListenState>(() => EMPTY);
  let live: Live | null = null;
  let draw: (() => void) | null = null;
  wireLog.onEntry(() => {
    draw ??= clock.after(DRAW_MS, () => {
      draw = null;
      store.setState({ entries: wireLog.entries() });
    });
  });

  async function readAll(session: ReadOnlySession): Promise<string> {
    const read = await session.readWhole({ onProgress: (progress) => store.setState({ progress }) });
    store.setState({ progress: null });
    if (!read.ok) return `Not everything could be read: ${read.error.message}`;
    return `${Object.keys(read.value.values).length} values were read.`;
  }

  async function begin(): Promise<void> {
    await live?.close();
    live = null;
    wireLog.clear();
    store.setState({ ...EMPTY, link: "opening" });
  }

  async function readWith(port: SerialPortLike, driver: CompiledDriver, replayed?: ReplayDevice): Promise<void> {
    await begin();
    const opened = await openSession({ port, driver, clock, wireLog });
    if (!opened.ok) {
      // A recording has no plug and no cable, so what helps with a port does not help there.
      const outcome = replayed === undefined ? { failure: opened.error } : { said: `No session opens. ${replayWords(replayed)}` };
      store.setState({ link: "none", ...outcome, entries: wireLog.entries() });
      return;
    }
    const { session, identity } = opened.value;
    live = { session, send: null, close: () => session.close() };
    session.onState((state) => {
      if (state.name === "lost" && live?.session === session) store.setState({ link: "lost", said: state.cause });
    });
    store.setState({ link: "listening", line: { kind: "driver", driver, identity } });
    const said = await readAll(session);
    store.setState({ said: replayed === undefined ? said : `${said} ${replayWords(replayed)}`, entries: wireLog.entries() });
  }

  return {
    store,
    wireLog,
    readWith: (port, driver) => readWith(port, driver),
    async replay(recording, driver) {
      const { port, device } = createReplayPort(recording, { clock, transport: driver.definition.transport, pace: "recorded" });
      await readWith(port, driver, device);
    },
    async listenRaw(port, options) {
      await begin();
      try {
        await port.open({ ...options, bufferSize: BUFFER_BYTES });
      } catch (error) {
        store.setState({ link: "none", failure: portFailureOf(error) });
        return;
      }
      const link = createLink(port, clock, {
        onBytes: (bytes) => wireLog.in(bytes),
        onGlitch: (cause) => wireLog.event(`The line broke: ${cause}`),
        onLost: (cause) => store.setState({ link: "lost", said: cause }),
      });
      live = { session: null, send: (bytes) => link.send(bytes), close: () => link.close() };
      store.setState({ link: "listening", line: { kind: "raw" }, said: "Listening. Nothing was sent." });
    },
    send(bytes) {
      if (store.getState().link !== "listening" || !live?.send) return fail("Nothing is sent on this line.");
      if (bytes.length === 0) return fail("There is nothing to send.");
      wireLog.out(bytes);
      live.send(bytes);
      return ok(null);
    },
    async readAgain() {
      const session = live?.session;
      if (store.getState().link !== "listening" || !session) return;
      const said = await readAll(session);
      store.setState({ said, entries: wireLog.entries() });
    },
    async stop() {
      await live?.close();
      live = null;
      draw?.();
      draw = null;
      store.setState({ link: "none", progress: null, entries: wireLog.entries() });
    },
  };
}
