import { fail, ok, type Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver, Frame } from "@/lib/serial/driver/compiled";
import type { SerialPortLike } from "@/lib/serial/port";
import type { WireLog } from "@/lib/serial/wire-log";
import { createExchanger } from "./exchanger";
import { askIdentity } from "./identify";
import { createLink, type Link } from "./link";
import { readWhole } from "./read-whole";
import { createRequests } from "./requests";
import { wait } from "./settled-within";
import type { DeviceSession, OpenFailure, RequestError, SessionState } from "./types";

/** Asked of the browser: its default of 255 bytes overruns. */
const BUFFER_BYTES = 16_384;
/** After DTR and RTS went on, before the first request: opening resets many boards. */
const SIGNALS_SETTLE_MS = 100;
/** Boot chatter is over when the line was silent this long; a line that never is gets its question after `CHATTER_MOST_MS` all the same. */
const CHATTER_QUIET_MS = 100;
const CHATTER_MOST_MS = 3000;

export type SessionParts = {
  /** Closed. The session opens it, owns it, and closes it. */
  readonly port: SerialPortLike;
  readonly driver: CompiledDriver;
  readonly clock: Clock;
  readonly wireLog: WireLog;
  /** A frame that answers nothing: chatter of a restart, another program's words. */
  readonly onUnasked?: ((frame: Frame) => void) | undefined;
};

export type OpenableSession = DeviceSession & {
  /** Opens the port, settles its lines and lets chatter pass. Once in a session's life. */
  open(signal?: AbortSignal): Promise<Result<void, OpenFailure>>;
};

function openFailureOf(error: unknown): OpenFailure {
  const name = error instanceof Error || error instanceof DOMException ? error.name : "";
  if (name === "NetworkError") return { code: "open-refused" };
  if (name === "InvalidStateError") return { code: "already-open" };
  return { code: "other", detail: error instanceof Error ? error.message : String(error) };
}

/**
 * A session over any port and any protocol: open → identify → ready → lost or closed.
 *
 * It owns the port for its life: one read loop, one writer, one queue. Everything that waits is settled when it ends.
 */
export function createDeviceSession({ port, driver, clock, wireLog, onUnasked }: SessionParts): OpenableSession {
  const { transport } = driver.definition;
  const listeners = new Set<(state: SessionState) => void>();
  let state: SessionState = { name: "closed" };
  let link: Link | null = null;

  function enter(next: SessionState, sentence: string): void {
    if (state.name === next.name && next.name !== "ready") return;
    state = next;
    wireLog.event(sentence);
    for (const listener of [...listeners]) listener(next);
  }

  const isOver = () => state.name === "lost" || state.name === "closed";

  function lose(cause: string): void {
    if (isOver()) return;
    enter({ name: "lost", cause }, cause);
    exchanger.end({ code: "lost", message: cause });
    // Lost or not, an open port has to be closed before it can be opened again.
    void link?.close();
  }

  const exchanger = createExchanger({
    driver, clock, wireLog,
    send: (bytes) => link?.send(bytes),
    onHopeless: lose,
    onUnasked: (frame) => onUnasked?.(frame),
  });
  const requests = createRequests(driver, exchanger);

  async function raiseSignals(): Promise<void> {
    try {
      await port.setSignals({ dataTerminalReady: true, requestToSend: true });
      // Some adapters pass a new RTS on only with the next write of DTR.
      await port.setSignals({ dataTerminalReady: true });
    } catch (error) {
      // A pseudo-terminal has no such lines, and works without them.
      wireLog.event(`The port's control lines could not be set (${error instanceof Error ? error.name : String(error)}).`);
    }
  }

  return {
    ...requests,
    get state() {
      return state;
    },
    onState(listener) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    async open(signal) {
      enter({ name: "opening" }, "Opening the port.");
      try {
        await port.open({ ...transport, bufferSize: BUFFER_BYTES });
      } catch (error) {
        const failure = openFailureOf(error);
        enter({ name: "closed" }, `The port did not open (${failure.code}).`);
        exchanger.end({ code: "lost", message: "The port did not open." });
        return fail(failure);
      }
      exchanger.drain(CHATTER_QUIET_MS + SIGNALS_SETTLE_MS, CHATTER_MOST_MS);
      link = createLink(port, clock, {
        onBytes: exchanger.onBytes,
        onGlitch: (cause) => wireLog.event(`The line broke (${cause}); reading goes on.`),
        onLost: lose,
      });
      await raiseSignals();
      await wait(clock, SIGNALS_SETTLE_MS, signal);
      await exchanger.whenQuiet();
      const lost = (): SessionState => state;
      const now = lost();
      return now.name === "lost" ? fail({ code: "other", detail: now.cause }) : ok(undefined);
    },
    async identify(signal) {
      if (isOver()) return fail<RequestError>({ code: "lost", message: "The session is over." });
      enter({ name: "identifying" }, "Asking who is there.");
      const identity = await askIdentity(driver, exchanger, signal);
      if (identity.ok && !isOver()) enter({ name: "ready", identity: identity.value }, `${identity.value.maker} ${identity.value.model} answered.`);
      return identity;
    },
    readWhole: (options = {}) => readWhole({ driver, clock, exchanger, asked: requests, onProgress: options.onProgress, signal: options.signal }),
    async close() {
      if (!isOver()) enter({ name: "closed" }, "The session was closed.");
      exchanger.end({ code: "lost", message: "The session was closed." });
      await link?.close();
    },
  };
}
