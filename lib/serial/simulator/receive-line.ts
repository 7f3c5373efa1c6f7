import type { BytePipe } from "./byte-pipe";
import { ByteQueue } from "./byte-queue";
import type { ReadFault } from "./port-faults";

export type ReceiveLineOptions = {
  readonly osBufferBytes: number;
  readonly reportsOverrun: boolean;
  readonly task: (fire: () => void) => void;
  readonly onFault: (fault: ReadFault) => void;
};

type Item =
  | {
      readonly kind: "bytes";
      readonly bytes: ByteQueue;
      settle: { resolve: () => void; reject: (reason: unknown) => void } | null;
    }
  | { readonly kind: "fault"; readonly fault: ReadFault };

/**
 * Device to host, on the system's side: what was sent and what went wrong, in order.
 *
 * Bytes wait here for the page's pipe. The first `osBufferBytes` of them are the system's own buffer; a sender with more waits
 * (or, at line speed, loses them), so what waits is bounded by the buffer and by what senders hold.
 */
export class ReceiveLine {
  readonly #options: ReceiveLineOptions;
  #items: Item[] = [];
  #pipe: BytePipe | null = null;
  #faultIsDue = false;
  #wakeWhenLive: (() => void)[] = [];
  #pumping = false;
  /** Bytes that found no room, since the beginning. */
  lostBytes = 0;

  constructor(options: ReceiveLineOptions) {
    this.#options = options;
  }

  /** Resolves when each byte is inside the host's buffers. Rejects InvalidStateError when the host throws them away first. */
  send(bytes: Uint8Array): Promise<void> {
    return new Promise((resolve, reject) => {
      const queue = new ByteQueue();
      queue.push(bytes);
      this.#items.push({ kind: "bytes", bytes: queue, settle: { resolve, reject } });
      this.pump();
    });
  }

  /** Bytes that do not wait. Where `held` (hardware flow control), the sender is stopped in time and nothing is lost. */
  arrive(bytes: Uint8Array, held: boolean): void {
    const queue = new ByteQueue();
    this.#items.push({ kind: "bytes", bytes: queue, settle: null });
    const room = held ? bytes.length : Math.max(0, this.#options.osBufferBytes + this.#pipeRoom() - this.#waiting());
    queue.push(bytes.subarray(0, room));
    this.lostBytes += Math.max(0, bytes.length - room);
    if (room < bytes.length && this.#options.reportsOverrun) this.fault("overrun");
    this.pump();
  }

  /** Something goes wrong after the bytes that were sent so far. The page learns of it in a later task. */
  fault(fault: ReadFault): void {
    const last = this.#items.at(-1);
    if (last?.kind === "fault" && last.fault === fault) return;
    this.#items.push({ kind: "fault", fault });
    this.pump();
  }

  connect(pipe: BytePipe): void {
    this.#pipe = pipe;
    pipe.onRoom = () => this.pump();
    for (const wake of this.#wakeWhenLive.splice(0)) wake();
    this.pump();
  }

  whenLive(): Promise<void> {
    if (this.#isLive()) return Promise.resolve();
    return new Promise((resolve) => this.#wakeWhenLive.push(resolve));
  }

  /** The host throws away what was received. Faults that were reported stay, as does the loss of the device. */
  flush(): void {
    this.#reject("The host has thrown away what was received.");
    this.#items = this.#items.filter((item) => item.kind === "fault");
    this.#pipe = null;
  }

  hostCloses(): void {
    this.#reject("The host has closed the port.");
    this.#items = [];
    this.#pipe = null;
  }

  /** A port that is opened starts with nothing in it. */
  reset(): void {
    this.#items = [];
    this.#pipe = null;
  }

  /** Moves what fits into the pipe, up to the first fault. Each turn takes an item away or stops. */
  pump(): void {
    if (this.#pumping) return;
    this.#pumping = true;
    try {
      while (this.#step());
    } finally {
      this.#pumping = false;
    }
    this.#settleSenders();
  }

  #step(): boolean {
    const item = this.#items[0];
    const pipe = this.#pipe;
    if (!item) return false;
    if (item.kind === "fault") {
      // The loss of the device is known without a stream; any other fault waits for one that reads.
      if (item.fault !== "lost" && !this.#isLive()) return false;
      this.#reportLater(item);
      return false;
    }
    if (item.bytes.length > 0) {
      if (!pipe || !this.#isLive() || pipe.room === 0) return false;
      pipe.push(item.bytes.take(pipe.room));
      if (item.bytes.length > 0) return true;
    }
    item.settle?.resolve();
    this.#items.shift();
    return true;
  }

  #reportLater(item: Item & { kind: "fault" }): void {
    if (this.#faultIsDue) return;
    this.#faultIsDue = true;
    this.#options.task(() => {
      this.#faultIsDue = false;
      if (this.#items[0] !== item) return;
      this.#items.shift();
      const pipe = this.#pipe;
      this.#options.onFault(item.fault);
      if (this.#pipe === pipe) this.#pipe = null;
      this.pump();
    });
  }

  /** Senders whose bytes all stand within the system's buffer are done. */
  #settleSenders(): void {
    let held = 0;
    for (const item of this.#items) {
      if (item.kind === "fault") continue;
      held += item.bytes.length;
      if (held > this.#options.osBufferBytes) return;
      item.settle?.resolve();
      item.settle = null;
    }
  }

  #reject(message: string): void {
    for (const item of this.#items) {
      if (item.kind === "bytes") item.settle?.reject(new DOMException(message, "InvalidStateError"));
    }
  }

  #isLive(): boolean {
    return this.#pipe !== null && !this.#pipe.broken && !this.#pipe.ended;
  }

  #pipeRoom(): number {
    return this.#isLive() ? (this.#pipe?.room ?? 0) : 0;
  }

  #waiting(): number {
    return this.#items.reduce((sum, item) => sum + (item.kind === "bytes" ? item.bytes.length : 0), 0);
  }
}
