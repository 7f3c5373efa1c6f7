import type { Clock } from "@/lib/serial/clock";
import type { SerialInputLines, SerialOpenOptions, SerialPortIdentity } from "@/lib/serial/port";
import type { BytePipe } from "./byte-pipe";
import type { ReadFault, WriteFault } from "./port-faults";
import { ReceiveLine } from "./receive-line";
import { TransmitLine } from "./transmit-line";

export type OutputLines = {
  readonly dataTerminalReady: boolean;
  readonly requestToSend: boolean;
  readonly break: boolean;
};

export type FarEndOptions = {
  readonly identity?: SerialPortIdentity;
  readonly connected?: boolean;
  /** Bytes that the system holds each way besides the page's own buffer. */
  readonly osBufferBytes?: number;
  /** Lines that the system switches on when it opens the port. DTR everywhere; RTS too on Windows, macOS and Linux (WICG/serial#195). */
  readonly linesOnOpen?: { readonly dataTerminalReady: boolean; readonly requestToSend: boolean };
  /** Whether the system tells of bytes that it lost: Windows does, POSIX does not. */
  readonly reportsOverrun?: boolean;
  /** What the system has to do before the port is open, such as connecting to the real thing; false or a throw refuses. */
  readonly prepareOpen?: (options: SerialOpenOptions) => Promise<boolean>;
};

/** What the page's port hears from the system. */
export type SystemListener = {
  readonly onReadFault: (fault: ReadFault) => void;
  readonly onWriteFault: (fault: WriteFault) => void;
};

/** Unplugging reaches the page by two roads, and on POSIX an unexplained error may come before either. */
export type UnplugOrder = "stream-first" | "event-first" | "unknown-error-first";

const NO_LINES: SerialInputLines = {
  dataCarrierDetect: false,
  clearToSend: false,
  ringIndicator: false,
  dataSetReady: false,
};
const ALL_OFF: OutputLines = { dataTerminalReady: false, requestToSend: false, break: false };

/**
 * The system's side of one plugged-in adapter, and the wire's end of it.
 *
 * One object lives from plug to unplug. The page's port opens and closes it; the device at the other end of the wire, or a
 * test in its place, sends and receives.
 */
export class SimulatedFarEnd {
  readonly identity: SerialPortIdentity;
  readonly receiveLine: ReceiveLine;
  readonly transmitLine: TransmitLine;
  readonly #clock: Clock;
  readonly #linesOnOpen: { readonly dataTerminalReady: boolean; readonly requestToSend: boolean };
  readonly #prepareOpen: (options: SerialOpenOptions) => Promise<boolean>;
  #listener: SystemListener | null = null;
  #openOptions: SerialOpenOptions | null = null;
  #outputLines: OutputLines = ALL_OFF;
  #inputLines: SerialInputLines = NO_LINES;
  #inputFails = false;
  #outputFails = false;
  #refusesOpen = false;
  #present = true;
  /** Called on each single change that the host makes. */
  onOutputSignals: ((lines: OutputLines) => void) | null = null;
  /** Called when the host opens or closes the port. */
  onOpenChange: ((isOpen: boolean) => void) | null = null;

  constructor(clock: Clock, options: FarEndOptions) {
    this.#clock = clock;
    this.identity = options.identity ?? {};
    this.#linesOnOpen = options.linesOnOpen ?? { dataTerminalReady: true, requestToSend: false };
    this.#prepareOpen = options.prepareOpen ?? (() => Promise.resolve(true));
    const osBufferBytes = options.osBufferBytes ?? 0;
    const task = (fire: () => void): void => void clock.after(0, fire);
    this.receiveLine = new ReceiveLine({
      osBufferBytes,
      reportsOverrun: options.reportsOverrun ?? true,
      task,
      onFault: (fault) => this.#listener?.onReadFault(fault),
    });
    this.transmitLine = new TransmitLine({
      osBufferBytes,
      task,
      isHeld: () => this.#openOptions?.flowControl === "hardware" && !this.#inputLines.clearToSend,
      onFault: (fault) => this.#listener?.onWriteFault(fault),
    });
  }

  /* The wire's side. */

  send(bytes: Uint8Array): Promise<void> {
    if (!this.#openOptions)
      return Promise.reject(new DOMException("The host has not opened the port.", "InvalidStateError"));
    return this.receiveLine.send(bytes);
  }

  /** Bytes at line speed: what finds no room is lost, unless hardware flow control holds the device back. */
  blast(bytes: Uint8Array): void {
    if (!this.#openOptions) return;
    this.receiveLine.arrive(bytes, this.#openOptions.flowControl === "hardware");
  }

  receive(): Promise<{ value?: Uint8Array; done: boolean }> {
    return this.transmitLine.receive();
  }

  whenListening(): Promise<void> {
    return this.receiveLine.whenLive();
  }

  whenTalking(): Promise<void> {
    return this.transmitLine.whenLive();
  }

  faultOnRead(fault: ReadFault): void {
    this.receiveLine.fault(fault);
  }

  faultOnWrite(fault: WriteFault): void {
    this.transmitLine.fault(fault);
  }

  get outputSignals(): OutputLines {
    return { ...this.#outputLines };
  }

  setInputSignals(lines: SerialInputLines): void {
    this.#inputLines = { ...lines };
    this.transmitLine.pump();
  }

  failInputSignals(fails: boolean): void {
    this.#inputFails = fails;
  }

  failOutputSignals(fails: boolean): void {
    this.#outputFails = fails;
  }

  /** Another program has the port, or the user may not use it. */
  refuseOpen(refuses: boolean): void {
    this.#refusesOpen = refuses;
  }

  /** The adapter leaves the machine: what was received stays readable, then both streams fail. */
  vanish(order: UnplugOrder): void {
    this.#present = false;
    if (order === "unknown-error-first") {
      this.receiveLine.fault("system");
      this.transmitLine.fault("system");
    }
    this.receiveLine.fault("lost");
    this.transmitLine.fault("lost");
  }

  get isOpen(): boolean {
    return this.#openOptions !== null;
  }

  /** How the host opened the port, or null. */
  get openOptions(): SerialOpenOptions | null {
    return this.#openOptions;
  }

  /* The system's side, for the page's port. */

  /** @returns false where the system refuses: gone, in use, not allowed */
  async openBySystem(options: SerialOpenOptions, listener: SystemListener): Promise<boolean> {
    if (!this.#mayOpen()) return false;
    const isPrepared = await this.#prepareOpen(options).catch(() => false);
    if (!isPrepared || !this.#mayOpen()) return false;
    this.#openOptions = options;
    this.#listener = listener;
    this.receiveLine.reset();
    this.transmitLine.reset();
    this.onOpenChange?.(true);
    if (this.#linesOnOpen.dataTerminalReady) this.#setLine({ dataTerminalReady: true });
    if (this.#linesOnOpen.requestToSend) this.#setLine({ requestToSend: true });
    return true;
  }

  closeBySystem(): void {
    if (!this.#openOptions) return;
    this.#openOptions = null;
    this.#listener = null;
    this.receiveLine.hostCloses();
    this.transmitLine.flush();
    this.#setLine({ dataTerminalReady: false });
    this.onOpenChange?.(false);
  }

  /** @returns the device's lines, or null where they cannot be read */
  readInputLines(): SerialInputLines | null {
    return this.#inputFails || !this.#present ? null : { ...this.#inputLines };
  }

  /** Sets the lines that are named, in the order DTR, RTS, break. @returns whether the system could */
  driveOutputLines(lines: Partial<OutputLines>): boolean {
    if (this.#outputFails || !this.#present) return false;
    for (const name of ["dataTerminalReady", "requestToSend", "break"] as const) {
      const value = lines[name];
      if (value !== undefined) this.#setLine({ [name]: value });
    }
    return true;
  }

  connectReceive(pipe: BytePipe): void {
    this.receiveLine.connect(pipe);
  }

  connectTransmit(pipe: BytePipe): void {
    this.transmitLine.connect(pipe);
  }

  /** Runs `fire` in a later task. */
  task(fire: () => void): void {
    this.#clock.after(0, fire);
  }

  #mayOpen(): boolean {
    return this.#present && !this.#refusesOpen && !this.#openOptions;
  }

  #setLine(change: Partial<OutputLines>): void {
    const before = this.#outputLines;
    this.#outputLines = { ...before, ...change };
    const changed = (Object.keys(change) as (keyof OutputLines)[]).some(
      (name) => before[name] !== this.#outputLines[name],
    );
    if (changed) this.onOutputSignals?.(this.outputSignals);
  }
}
