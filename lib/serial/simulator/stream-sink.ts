import type { BytePipe } from "./byte-pipe";
import type { WriteFault } from "./port-faults";
import { faultException } from "./port-faults";

/** What the sink asks of the port it belongs to. */
export type SinkPort = {
  readonly isClosing: () => boolean;
  readonly sinkClosed: (sink: StreamSink) => void;
  /** Resolves when the last byte in the pipe and in the system has left. */
  readonly drain: () => Promise<void>;
  /** Throws away what was written and not sent. */
  readonly flushTransmit: () => Promise<void>;
  /** Runs `fire` in a later task. */
  readonly task: (fire: () => void) => void;
};

type Operation = { readonly resolve: () => void; readonly reject: (reason: unknown) => void };

function viewOf(chunk: unknown): Uint8Array {
  if (!(chunk instanceof ArrayBuffer) && !ArrayBuffer.isView(chunk)) {
    throw new TypeError("The chunk is neither an ArrayBuffer nor a view of one.");
  }
  // A buffer that is detached by now has no bytes, and no view can be made of it.
  if (chunk.byteLength === 0) return new Uint8Array(0);
  if (chunk instanceof ArrayBuffer) return new Uint8Array(chunk);
  return new Uint8Array(chunk.buffer, chunk.byteOffset, chunk.byteLength);
}

/**
 * Takes what is written to a `writable` into the pipe. A write is done when its bytes are in the pipe, not when they are on
 * the wire; the chunk is looked at again each time there is room, so taking its buffer away ends the write.
 * One operation is open at a time: a write, or the wait of a close or an abort.
 */
export class StreamSink implements UnderlyingSink<Uint8Array> {
  readonly #pipe: BytePipe;
  readonly #port: SinkPort;
  #controller: WritableStreamDefaultController | null = null;
  #operation: Operation | null = null;
  #chunk: Uint8Array | null = null;
  #offset = 0;
  #filling = false;
  #fillIsDue = false;
  #draining = false;
  #done = false;

  constructor(pipe: BytePipe, port: SinkPort) {
    this.#pipe = pipe;
    this.#port = port;
    pipe.onRoom = () => this.#fillLater();
  }

  start(controller: WritableStreamDefaultController): void {
    this.#controller = controller;
    controller.signal.addEventListener("abort", () => this.#onAbort(controller.signal.reason), { once: true });
  }

  write(chunk: Uint8Array): Promise<void> {
    this.#chunk = viewOf(chunk);
    this.#offset = 0;
    const settled = this.#open();
    this.#fill();
    return settled;
  }

  close(): Promise<void> {
    const settled = this.#open();
    this.#draining = true;
    this.#pipe.onRoom = null;
    this.#pipe.end();
    this.#follow(this.#port.drain());
    return settled;
  }

  abort(): Promise<void> | undefined {
    this.#pipe.onRoom = null;
    this.#pipe.end();
    if (this.#port.isClosing()) {
      this.#finish();
      return undefined;
    }
    const settled = this.#open();
    this.#follow(this.#port.flushTransmit());
    return settled;
  }

  /** The system reports `fault`: the open operation, or else the stream, fails with it at once. */
  signal(fault: WriteFault): void {
    if (this.#done) return;
    const exception = faultException(fault);
    const operation = this.#settle();
    if (operation) operation.reject(exception);
    else this.#controller?.error(exception);
    this.#finish();
  }

  #open(): Promise<void> {
    return new Promise((resolve, reject) => {
      this.#operation = { resolve, reject };
    });
  }

  /** Closes the open operation when the system has done its part, unless a fault or an abort was first. */
  #follow(work: Promise<void>): void {
    void work.then(() => {
      this.#settle()?.resolve();
      this.#finish();
    });
  }

  #settle(): Operation | null {
    const operation = this.#operation;
    this.#operation = null;
    this.#chunk = null;
    return operation;
  }

  #fill(): void {
    const chunk = this.#chunk;
    if (!chunk || !this.#operation || this.#pipe.broken) return;
    this.#filling = true;
    // A detached buffer leaves a view of length 0. Each turn takes a byte at least, so the chunk bounds the loop.
    while (this.#offset < chunk.byteLength) {
      const taken = this.#pipe.push(chunk.subarray(this.#offset));
      if (taken === 0) break;
      this.#offset += taken;
    }
    this.#filling = false;
    if (this.#offset >= chunk.byteLength) this.#settle()?.resolve();
  }

  /** Room in the pipe is noticed in a later task, as a signal from another process is. */
  #fillLater(): void {
    if (!this.#chunk || this.#filling || this.#fillIsDue) return;
    this.#fillIsDue = true;
    this.#port.task(() => {
      this.#fillIsDue = false;
      this.#fill();
    });
  }

  #onAbort(reason: unknown): void {
    this.#settle()?.reject(reason);
    if (!this.#draining) return;
    // A stream that is aborted while it closes never calls `abort` here, so what waits in the system is thrown away now.
    void this.#port.flushTransmit().then(() => this.#finish());
  }

  #finish(): void {
    if (this.#done) return;
    this.#done = true;
    this.#pipe.onRoom = null;
    this.#port.sinkClosed(this);
  }
}
