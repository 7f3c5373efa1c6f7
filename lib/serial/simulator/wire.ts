import type { Clock } from "@/lib/serial/clock";
import type { ByteFate, WireDirection, WireEvent, WireFault } from "./wire-fault";

/** Where a line takes its bytes from: the sender's buffer. */
export type ByteSource = { readonly available: number; takeByte(): number | undefined };

export type LineOptions = {
  readonly clock: Clock;
  readonly direction: WireDirection;
  readonly source: ByteSource;
  readonly deliver: (bytes: Uint8Array) => void;
  /** Asked for each byte; null: none. */
  readonly fault: () => WireFault | null;
  readonly onEvent: (event: WireEvent) => void;
  /**
   * How long bytes that are due may wait for the ones behind them, in ms; 0 by default: each byte at its own moment.
   * For real streams, where every delivery is a system call.
   */
  readonly grainMs?: number;
};

const PASS: ByteFate = { kind: "pass" };

/** Rounding of sums of byte times, in ms: far below any byte time. */
const ROUNDING_MS = 1e-6;

/**
 * One direction of a serial line: each byte is due one character's time after the one before it.
 *
 * Moments are computed, not slept: when a timer fires late, every byte that is due by then is delivered at once, and the
 * next one is due where it would have been. So a slow timer makes the line jerky, never slower.
 */
export class PacedLine {
  readonly #options: LineOptions;
  #characterMs = 0;
  /** When the next byte is over; null: nothing is under way. */
  #dueMs: number | null = null;
  /** A byte that a fault holds back. */
  #held: number | null = null;
  #takeBack: (() => void) | null = null;
  #stalled = false;
  #byteIndex = 0;

  constructor(options: LineOptions) {
    this.#options = options;
  }

  /** Bytes that have left the line since the beginning, faulty ones included. */
  get byteCount(): number {
    return this.#byteIndex;
  }

  /** Sets the time of a character; 0: bytes arrive at once. */
  setPace(perCharacterMs: number): void {
    this.#characterMs = perCharacterMs;
  }

  /** The source has bytes now. */
  wake(): void {
    if (this.#dueMs !== null || this.#stalled || this.#options.source.available === 0) return;
    this.#dueMs = this.#options.clock.nowMs() + this.#characterMs;
    this.#schedule();
  }

  /** Lets a stalled line go on. */
  release(): void {
    if (!this.#stalled) return;
    this.#stalled = false;
    if (this.#held !== null) this.#dueMs = this.#options.clock.nowMs();
    this.#schedule();
    this.wake();
  }

  /** Stops: what is under way is lost. */
  stop(): void {
    this.#takeBack?.();
    this.#takeBack = null;
    this.#dueMs = null;
    this.#held = null;
    this.#stalled = false;
  }

  #schedule(): void {
    if (this.#dueMs === null || this.#takeBack) return;
    const waitMs = this.#wakeMs(this.#dueMs) - this.#options.clock.nowMs();
    if (waitMs > 0) {
      this.#takeBack = this.#options.clock.after(waitMs, () => this.#tick());
      return;
    }
    // Due already: after the caller's own work, and without a timer, which a browser would make 4 ms long.
    let live = true;
    this.#takeBack = () => {
      live = false;
    };
    queueMicrotask(() => {
      if (live) this.#tick();
    });
  }

  /** When to look: at the next byte's moment, or, with a grain, when as many are due as may wait for one another. */
  #wakeMs(dueMs: number): number {
    const { grainMs = 0, source } = this.#options;
    if (grainMs === 0 || this.#held !== null) return dueMs;
    return dueMs + Math.min(grainMs, Math.max(0, source.available - 1) * this.#characterMs);
  }

  /** Delivers what is due. Each turn takes a byte from the source or ends. */
  #tick(): void {
    this.#takeBack = null;
    const nowMs = this.#options.clock.nowMs() + ROUNDING_MS;
    const arrived: number[] = [];
    let event: WireEvent | null = null;
    while (this.#dueMs !== null && this.#dueMs <= nowMs && !event) event = this.#takeByte(this.#dueMs, arrived);
    this.#schedule();
    if (arrived.length > 0) this.#options.deliver(Uint8Array.from(arrived));
    if (event) this.#options.onEvent(event);
  }

  /** Takes the byte that is over at `dueMs`, if it was not thrown away meanwhile, and says when the next one is. */
  #takeByte(dueMs: number, arrived: number[]): WireEvent | null {
    const { source, direction, fault } = this.#options;
    const held = this.#held;
    this.#held = null;
    const byte = held ?? source.takeByte();
    if (byte === undefined) {
      this.#dueMs = null;
      return null;
    }
    const fate: ByteFate = held === null ? (fault()?.onByte(byte, this.#byteIndex, direction) ?? PASS) : PASS;
    if (held === null) this.#byteIndex += 1;
    if (fate.kind === "delay" || fate.kind === "stall") {
      this.#held = byte;
      this.#stalled = fate.kind === "stall";
      this.#dueMs = fate.kind === "delay" ? dueMs + fate.delayMs : null;
      return null;
    }
    this.#dueMs = source.available > 0 ? dueMs + this.#characterMs : null;
    if (fate.kind === "event") return fate.event;
    arrived.push(...(fate.kind === "replace" ? fate.bytes : [byte]));
    return null;
  }
}
