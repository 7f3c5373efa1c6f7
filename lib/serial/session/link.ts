import type { Clock } from "@/lib/serial/clock";
import type { SerialPortLike } from "@/lib/serial/port";
import { settledWithin } from "./settled-within";

/** Errors of the read stream in a row, without a byte between them, that are borne: past that the port counts as lost. */
export const MAX_GLITCHES = 8;
/** How long an orderly end may take before it is cut short. Under flow control it may never come. */
const CLOSE_MS = 500;

export type LinkEvents = {
  readonly onBytes: (bytes: Uint8Array) => void;
  /** The stream broke (parity, framing, break, overrun, unknown) and was taken anew. */
  readonly onGlitch: (cause: string) => void;
  /** The port is gone; called once, never after `close`. */
  readonly onLost: (cause: string) => void;
};

/** An open port: one read loop and one writer for as long as it is open. */
export interface Link {
  /** Hands bytes to the browser. They are not on the wire yet when this returns; only a reply says that they arrived. */
  send(bytes: Uint8Array): void;
  /** Ends reading and writing and closes the port. Never throws, never hangs, may be called again. */
  close(): Promise<void>;
}

const nameOf = (error: unknown) => (error instanceof Error || error instanceof DOMException ? error.name : String(error));

/** Takes charge of an open port. Source of the stream rules: WICG/serial, "SerialPort interface". */
export function createLink(port: SerialPortLike, clock: Clock, events: LinkEvents): Link {
  let ended = false;
  let reader: ReadableStreamDefaultReader<Uint8Array> | null = null;
  let writer: WritableStreamDefaultWriter<Uint8Array> | null = null;
  let closing: Promise<void> | null = null;

  function lose(cause: string): void {
    if (ended) return;
    ended = true;
    port.removeEventListener("disconnect", unplugged);
    events.onLost(cause);
  }

  function unplugged(): void {
    lose("The adapter was unplugged.");
  }

  /** Reads one stream to its end. @returns the error's name, or null at an orderly end */
  async function readStream(stream: ReadableStream<Uint8Array>, onByte: () => void): Promise<string | null> {
    reader = stream.getReader();
    try {
      for (;;) {
        const { value, done } = await reader.read();
        if (done) return null;
        if (value.length === 0) continue;
        onByte();
        events.onBytes(value);
      }
    } catch (error) {
      return nameOf(error);
    } finally {
      reader.releaseLock();
      reader = null;
    }
  }

  async function pump(): Promise<void> {
    let glitches = 0;
    while (!ended) {
      const stream = port.readable;
      if (!stream) return lose("The port went away.");
      const error = await readStream(stream, () => (glitches = 0));
      if (ended) return;
      glitches += 1;
      if (glitches > MAX_GLITCHES) return lose(`The port failed ${MAX_GLITCHES} times in a row (${error ?? "it closed its stream"}).`);
      if (port.readable) events.onGlitch(error ?? "the stream ended");
    }
  }

  function takeWriter(): WritableStreamDefaultWriter<Uint8Array> | null {
    writer ??= port.writable?.getWriter() ?? null;
    return writer;
  }

  function writeFailed(used: WritableStreamDefaultWriter<Uint8Array>, error: unknown): void {
    if (ended || writer !== used) return;
    used.releaseLock();
    writer = null;
    if (port.writable) events.onGlitch(`writing failed: ${nameOf(error)}`);
    else lose("The port went away while writing.");
  }

  async function shut(): Promise<void> {
    ended = true;
    port.removeEventListener("disconnect", unplugged);
    await settledWithin(clock, CLOSE_MS, reader?.cancel());
    await settledWithin(clock, CLOSE_MS, pumping);
    if (writer) {
      const drained = await settledWithin(clock, CLOSE_MS, writer.close());
      if (!drained) await settledWithin(clock, CLOSE_MS, writer.abort(new DOMException("The session ended.", "AbortError")));
      writer.releaseLock();
      writer = null;
    }
    await settledWithin(clock, CLOSE_MS, port.close());
  }

  port.addEventListener("disconnect", unplugged);
  takeWriter();
  const pumping = pump();

  return {
    send(bytes) {
      if (ended) return;
      const used = takeWriter();
      if (!used) return lose("The port went away while writing.");
      used.write(bytes).catch((error: unknown) => writeFailed(used, error));
    },
    close: () => (closing ??= shut()),
  };
}
