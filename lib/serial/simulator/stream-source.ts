import type { BytePipe } from "./byte-pipe";
import type { ReadFault } from "./port-faults";
import { faultException } from "./port-faults";

/** What the source asks of the port it belongs to. */
export type SourcePort = {
  readonly isClosing: () => boolean;
  /** The stream is done with: the port makes a new one when it is next asked. */
  readonly sourceClosed: (source: StreamSource) => void;
  /** Throws away what was received and not read. Resolves when the system has done so. */
  readonly flushReceive: () => Promise<void>;
};

/**
 * Feeds a `readable` from the pipe, and only when asked: the high-water mark is 0, as the engine has it.
 * So an error, the loss of the device included, is seen at the next pull and not before, after the bytes that came first.
 */
export class StreamSource implements UnderlyingByteSource {
  readonly type = "bytes";
  readonly #pipe: BytePipe;
  readonly #port: SourcePort;
  #controller: ReadableByteStreamController | null = null;
  #endPull: (() => void) | null = null;
  #fault: ReadFault | null = null;
  #closed = false;

  constructor(pipe: BytePipe, port: SourcePort) {
    this.#pipe = pipe;
    this.#port = port;
    pipe.onBytes = () => this.#onPipe();
  }

  start(controller: ReadableByteStreamController): void {
    this.#controller = controller;
  }

  pull(): Promise<void> | undefined {
    if (this.#deliver()) return undefined;
    return new Promise((resolve) => {
      this.#endPull = resolve;
    });
  }

  async cancel(): Promise<void> {
    this.#close();
    if (!this.#port.isClosing()) await this.#port.flushReceive();
    this.#port.sourceClosed(this);
  }

  /** The system reports `fault`: shown once the pipe is read to its end. */
  signal(fault: ReadFault): void {
    if (this.#closed || this.#fault) return;
    this.#fault = fault;
    this.#pipe.end();
    this.#onPipe();
  }

  #onPipe(): void {
    if (this.#endPull && this.#deliver()) this.#settlePull();
  }

  /** Hands bytes or the fault on. @returns whether the pull was served */
  #deliver(): boolean {
    const controller = this.#controller;
    if (this.#closed || !controller) return true;
    if (this.#pipe.length > 0) {
      const request = controller.byobRequest;
      const view = request?.view;
      if (request && view) {
        const taken = this.#pipe.take(view.byteLength);
        new Uint8Array(view.buffer, view.byteOffset, view.byteLength).set(taken);
        request.respond(taken.length);
      } else {
        controller.enqueue(this.#pipe.take(this.#pipe.length));
      }
      return true;
    }
    if (!this.#fault) return false;
    const exception = faultException(this.#fault);
    this.#close();
    controller.error(exception);
    this.#port.sourceClosed(this);
    return true;
  }

  #settlePull(): void {
    const end = this.#endPull;
    this.#endPull = null;
    end?.();
  }

  #close(): void {
    this.#closed = true;
    this.#pipe.onBytes = null;
    this.#pipe.breakOff();
    this.#settlePull();
  }
}
