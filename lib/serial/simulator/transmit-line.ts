import type { BytePipe } from "./byte-pipe";
import { ByteQueue } from "./byte-queue";
import type { WriteFault } from "./port-faults";

export type TransmitLineOptions = {
  readonly osBufferBytes: number;
  readonly task: (fire: () => void) => void;
  /** Flow control holds the bytes back. */
  readonly isHeld: () => boolean;
  readonly onFault: (fault: WriteFault) => void;
};

type Received = { value?: Uint8Array; done: boolean };

/**
 * Host to device, on the system's side: takes from the page's pipe into the system's buffer, and hands bytes to the wire (or
 * to a waiting `receive`) when they are asked for. Holds at most `osBufferBytes` besides the pipe.
 */
export class TransmitLine {
  readonly #options: TransmitLineOptions;
  readonly #osBuffer = new ByteQueue();
  #pipe: BytePipe | null = null;
  #faults: WriteFault[] = [];
  #endIsUnread = false;
  #receivers: ((received: Received) => void)[] = [];
  #drains: (() => void)[] = [];
  #wakeWhenLive: (() => void)[] = [];
  #lost = false;
  /** A wire that asks for bytes by itself is told when there are some. */
  onAvailable: (() => void) | null = null;

  constructor(options: TransmitLineOptions) {
    this.#options = options;
  }

  /** Bytes that the wire may take now. */
  get available(): number {
    if (this.#options.isHeld()) return 0;
    return this.#osBuffer.length + (this.#options.osBufferBytes === 0 ? (this.#pipe?.length ?? 0) : 0);
  }

  /** Takes bytes for the wire. */
  take(most: number): Uint8Array {
    if (this.#options.isHeld()) return new Uint8Array(0);
    const taken =
      this.#options.osBufferBytes === 0 ? (this.#pipe?.take(most) ?? new Uint8Array(0)) : this.#osBuffer.take(most);
    this.#fillOsBuffer();
    this.#noticeEmpty();
    return taken;
  }

  /** Takes one byte for the wire. */
  takeByte(): number | undefined {
    if (this.#options.isHeld()) return undefined;
    const byte = this.#options.osBufferBytes === 0 ? this.#pipe?.takeByte() : this.#osBuffer.takeByte();
    this.#fillOsBuffer();
    this.#noticeEmpty();
    return byte;
  }

  receive(): Promise<Received> {
    return new Promise((resolve) => {
      this.#receivers.push(resolve);
      this.#serve();
    });
  }

  connect(pipe: BytePipe): void {
    this.#pipe = pipe;
    this.#endIsUnread = false;
    pipe.onBytes = () => this.pump();
    if (this.#lost || this.#faults.length > 0) pipe.breakOff();
    if (this.#lost && this.#faults.length === 0) this.fault("lost");
    for (const wake of this.#wakeWhenLive.splice(0)) wake();
    this.pump();
  }

  whenLive(): Promise<void> {
    if (this.#pipe && !this.#pipe.ended && !this.#pipe.broken) return Promise.resolve();
    return new Promise((resolve) => this.#wakeWhenLive.push(resolve));
  }

  /** Writing fails from now on; the page learns of it in a later task. What was in the pipe is gone. */
  fault(fault: WriteFault): void {
    if (fault === "lost") this.#lost = true;
    this.#osBuffer.clear();
    this.#pipe?.breakOff();
    this.#faults.push(fault);
    this.#options.task(() => {
      const due = this.#faults.shift();
      if (due === undefined) return;
      this.#pipe = null;
      this.#options.onFault(due);
    });
  }

  /** Resolves, in a later task, when everything written has left. */
  drain(): Promise<void> {
    return new Promise((resolve) => {
      this.#drains.push(resolve);
      this.pump();
    });
  }

  /** Throws away what was written and has not left; a drain that waits is over. */
  flush(): void {
    this.#osBuffer.clear();
    this.#pipe?.breakOff();
    this.#pipe = null;
    this.#noticeEnd();
    this.#noticeEmpty();
  }

  reset(): void {
    this.#osBuffer.clear();
    this.#pipe = null;
    this.#faults = [];
    this.#endIsUnread = false;
  }

  pump(): void {
    this.#fillOsBuffer();
    this.#serve();
    if (this.available > 0) this.onAvailable?.();
    this.#noticeEmpty();
  }

  #fillOsBuffer(): void {
    const room = this.#options.osBufferBytes - this.#osBuffer.length;
    if (room > 0 && this.#pipe && this.#pipe.length > 0) this.#osBuffer.push(this.#pipe.take(room));
  }

  /** Hands all that is there to the first who waits. */
  #serve(): void {
    if (this.#receivers.length === 0) return;
    if (this.available > 0) {
      const value = this.take(this.available);
      this.#receivers.shift()?.({ value, done: false });
    } else if (this.#endIsUnread) {
      this.#endIsUnread = false;
      this.#receivers.shift()?.({ done: true });
    }
  }

  #noticeEmpty(): void {
    if (this.#osBuffer.length > 0 || (this.#pipe?.length ?? 0) > 0) return;
    if (this.#pipe?.ended) {
      this.#pipe = null;
      this.#noticeEnd();
    }
    const drains = this.#drains.splice(0);
    if (drains.length > 0) this.#options.task(() => drains.forEach((resolve) => resolve()));
  }

  #noticeEnd(): void {
    this.#endIsUnread = true;
    this.#serve();
  }
}
