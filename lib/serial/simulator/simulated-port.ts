import type {
  SerialInputLines,
  SerialOpenOptions,
  SerialOutputLines,
  SerialPortIdentity,
  SerialPortLike,
} from "@/lib/serial/port";
import { BytePipe } from "./byte-pipe";
import { EventTree } from "./event-tree";
import type { OutputLines, SimulatedFarEnd } from "./far-end";
import { checkOpenOptions, convertOpenOptions, DEFAULT_BUFFER_BYTES } from "./open-options";
import type { ReadFault, WriteFault } from "./port-faults";
import { StreamSink } from "./stream-sink";
import { StreamSource } from "./stream-source";

type State = "closed" | "opening" | "opened" | "closing" | "forgotten";

/** What a port asks of the `serial` that it belongs to. */
export type PortParent = { readonly tree: EventTree; readonly forget: (far: SimulatedFarEnd) => void };

function invalidState(message: string): DOMException {
  return new DOMException(message, "InvalidStateError");
}

function networkError(message: string): DOMException {
  return new DOMException(message, "NetworkError");
}

/**
 * A port as a page sees it, after the W3C Web Serial specification and, where its steps and the engine differ, the engine.
 *
 * Source: WICG/serial, "SerialPort interface"; the W3C test suite `serial/`.
 */
export class SimulatedSerialPort extends EventTree implements SerialPortLike {
  static {
    // Pages and tests ask for the interface's name, which a bundler may have changed.
    Object.defineProperty(this, "name", { value: "SerialPort" });
  }

  readonly #far: SimulatedFarEnd;
  readonly #parent: PortParent;
  #state: State = "closed";
  #connected: boolean;
  #bufferBytes = DEFAULT_BUFFER_BYTES;
  #readable: ReadableStream<Uint8Array> | null = null;
  #writable: WritableStream<Uint8Array> | null = null;
  #source: StreamSource | null = null;
  #sink: StreamSink | null = null;
  #readFatal = false;
  #writeFatal = false;

  constructor(far: SimulatedFarEnd, parent: PortParent, connected: boolean) {
    super(parent.tree);
    this.#far = far;
    this.#parent = parent;
    this.#connected = connected;
  }

  get onconnect(): ((event: Event) => void) | null {
    return this.handlerOf("connect");
  }

  set onconnect(handler: ((event: Event) => void) | null) {
    this.setHandler("connect", handler);
  }

  get ondisconnect(): ((event: Event) => void) | null {
    return this.handlerOf("disconnect");
  }

  set ondisconnect(handler: ((event: Event) => void) | null) {
    this.setHandler("disconnect", handler);
  }

  get connected(): boolean {
    return this.#connected;
  }

  get readable(): ReadableStream<Uint8Array> | null {
    if (this.#state !== "opened") return null;
    if (this.#readable || this.#readFatal) return this.#readable;
    const pipe = new BytePipe(this.#bufferBytes);
    const source = new StreamSource(pipe, {
      isClosing: () => this.#state === "closing",
      sourceClosed: (closed) => this.#sourceClosed(closed),
      flushReceive: () => this.#later(() => this.#far.receiveLine.flush()),
    });
    this.#source = source;
    this.#readable = new ReadableStream(source, { highWaterMark: 0 });
    this.#far.connectReceive(pipe);
    return this.#readable;
  }

  get writable(): WritableStream<Uint8Array> | null {
    if (this.#state !== "opened") return null;
    if (this.#writable || this.#writeFatal) return this.#writable;
    const pipe = new BytePipe(this.#bufferBytes);
    const sink = new StreamSink(pipe, {
      isClosing: () => this.#state === "closing",
      sinkClosed: (closed) => this.#sinkClosed(closed),
      drain: () => this.#far.transmitLine.drain(),
      flushTransmit: () => this.#later(() => this.#far.transmitLine.flush()),
      task: (fire) => this.#far.task(fire),
    });
    this.#sink = sink;
    this.#writable = new WritableStream(sink, { highWaterMark: 1 });
    this.#far.connectTransmit(pipe);
    return this.#writable;
  }

  getInfo(): SerialPortIdentity {
    const { usbVendorId, usbProductId } = this.#far.identity;
    return {
      ...(usbVendorId === undefined ? {} : { usbVendorId }),
      ...(usbProductId === undefined ? {} : { usbProductId }),
    };
  }

  async open(options: SerialOpenOptions): Promise<void> {
    const wanted = convertOpenOptions(options);
    if (this.#state === "forgotten") throw networkError("Failed to open serial port.");
    if (this.#state !== "closed") throw invalidState("The port is already open.");
    checkOpenOptions(wanted);
    this.#state = "opening";
    await this.#later(() => undefined);
    const listener = {
      onReadFault: (fault: ReadFault) => this.#readFault(fault),
      onWriteFault: (fault: WriteFault) => this.#writeFault(fault),
    };
    const isOpen = await this.#far.openBySystem(wanted, listener);
    // `forget` may have come in between.
    if (!isOpen || this.#currentState() !== "opening") {
      if (isOpen) this.#far.closeBySystem();
      if (this.#currentState() === "opening") this.#state = "closed";
      throw networkError("Failed to open serial port.");
    }
    this.#bufferBytes = wanted.bufferSize;
    this.#readFatal = false;
    this.#writeFatal = false;
    this.#state = "opened";
  }

  async close(): Promise<void> {
    if (this.#state === "closing") throw invalidState("A call to close() is already in progress.");
    if (this.#state !== "opened") throw invalidState("The port is already closed.");
    this.#state = "closing";
    try {
      await Promise.all(this.#endStreams());
    } catch (error) {
      // A stream is locked: the port is open as before.
      if (this.#currentState() === "closing") this.#state = "opened";
      throw error;
    }
    await this.#later(() => this.#far.closeBySystem());
    if (this.#currentState() === "closing") this.#state = "closed";
  }

  async forget(): Promise<void> {
    if (this.#state === "forgotten") return;
    await this.#later(() => this.#parent.forget(this.#far));
    this.#state = "forgotten";
    this.#readFault("lost");
    this.#writeFault("lost");
    this.#far.closeBySystem();
  }

  async getSignals(): Promise<SerialInputLines> {
    this.#requireOpen();
    const lines = await this.#later(() => this.#far.readInputLines());
    if (!lines) throw networkError("Failed to get control signals.");
    return lines;
  }

  async setSignals(signals?: SerialOutputLines | null): Promise<void> {
    this.#requireOpen();
    const wanted = signals ?? {};
    const names = (["dataTerminalReady", "requestToSend", "break"] as const).filter(
      (name) => wanted[name] !== undefined,
    );
    if (names.length === 0) throw new TypeError("Signals dictionary must contain at least one member.");
    const lines: Partial<OutputLines> = Object.fromEntries(names.map((name) => [name, Boolean(wanted[name])]));
    if (!(await this.#later(() => this.#far.driveOutputLines(lines))))
      throw networkError("Failed to set control signals.");
  }

  #requireOpen(): void {
    if (this.#state !== "opened" && this.#state !== "closing") throw invalidState("The port is not open.");
  }

  /** The state after a wait, when another call may have moved it. */
  #currentState(): State {
    return this.#state;
  }

  /** Ends both streams; throws TypeError where one is locked, after the other may have been ended, as the engine does. */
  #endStreams(): Promise<void>[] {
    const ends: Promise<void>[] = [];
    if (this.#readable) {
      if (this.#readable.locked) throw new TypeError("Cannot close the port while readable is locked.");
      ends.push(this.#readable.cancel());
    }
    if (this.#writable) {
      if (this.#writable.locked) throw new TypeError("Cannot close the port while writable is locked.");
      ends.push(this.#writable.abort(invalidState("The port is closed.")));
    }
    return ends;
  }

  /** Asks the system, which answers in a later task. */
  #later<T>(ask: () => T): Promise<T> {
    return new Promise((resolve) => this.#far.task(() => resolve(ask())));
  }

  #readFault(fault: ReadFault): void {
    if (fault === "lost") this.#readFatal = true;
    this.#source?.signal(fault);
  }

  #writeFault(fault: WriteFault): void {
    if (fault === "lost") this.#writeFatal = true;
    this.#sink?.signal(fault);
  }

  #sourceClosed(source: StreamSource): void {
    if (this.#source !== source) return;
    this.#source = null;
    this.#readable = null;
  }

  #sinkClosed(sink: StreamSink): void {
    if (this.#sink !== sink) return;
    this.#sink = null;
    this.#writable = null;
  }

  /** Moves the logical connection and tells of it. For the `serial` that owns this port, not for pages. */
  static tell(port: SimulatedSerialPort, connected: boolean): void {
    port.#connected = connected;
    port.dispatchEvent(new Event(connected ? "connect" : "disconnect", { bubbles: true }));
  }
}
