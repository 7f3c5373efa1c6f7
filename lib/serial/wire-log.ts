import type { Clock } from "./clock";

/** Exchanges that the log keeps: the oldest make room. */
export const MAX_EXCHANGES = 10_000;
/** A request and its reply are two entries. */
const MAX_ENTRIES = 2 * MAX_EXCHANGES;

export type WireNote =
  | "unasked" // no request waits for it
  | "late" // came while the line was being drained
  | "echo"
  | "noise" // no frame: a wrong check, too long, not text
  | "refused"
  | "busy";

/** One line of the wire log: bytes one way, or something that happened (bytes empty, `text` says what). */
export type WireEntry = {
  /** Counts up from 1 over everything ever logged. */
  readonly number: number;
  readonly atMs: number;
  readonly wallMs: number;
  readonly direction: "out" | "in" | "event";
  readonly bytes: Uint8Array;
  readonly text: string;
  /** Number of the request that this belongs to: its own, or the one it answers. */
  readonly exchange: number | undefined;
  /** From the request to this reply, in ms. */
  readonly tookMs: number | undefined;
  readonly note: WireNote | undefined;
};

export interface WireLog {
  /** A request that leaves. @returns its number, by which replies refer to it */
  out(bytes: Uint8Array): number;
  in(bytes: Uint8Array, about?: { readonly exchange?: number; readonly note?: WireNote }): void;
  event(text: string): void;
  /** A copy of what is kept, oldest first. */
  entries(): readonly WireEntry[];
  /** Requests ever logged. */
  readonly exchangeCount: number;
  /** Entries that made room. */
  readonly droppedCount: number;
  onEntry(listener: (entry: WireEntry) => void): () => void;
  clear(): void;
}

/** Printable text of bytes: what has no glyph stands as `·`, line ends are left out. */
export function printable(bytes: Uint8Array): string {
  let text = "";
  for (const byte of bytes) if (byte !== 10 && byte !== 13) text += byte >= 32 && byte < 127 ? String.fromCharCode(byte) : "·";
  return text;
}

/** The hex pair of each byte, after a space: every frame on a line is told as hex. */
const HEX_PAIRS = Array.from({ length: 256 }, (_, byte) => ` ${byte.toString(16).toUpperCase().padStart(2, "0")}`);

/** Bytes as hex pairs with spaces: `53 4C`. */
export function hexOf(bytes: Uint8Array): string {
  let text = "";
  for (const byte of bytes) text += HEX_PAIRS[byte] ?? "";
  return text.slice(1);
}

/**
 * Makes a wire log: a ring of the last exchanges.
 * @param options.maxEntries bound on entries, for tests; twice `MAX_EXCHANGES` by default
 */
export function createWireLog({ clock, maxEntries = MAX_ENTRIES }: { readonly clock: Clock; readonly maxEntries?: number }): WireLog {
  const ring: WireEntry[] = [];
  const listeners = new Set<(entry: WireEntry) => void>();
  /** When each request that may still be answered left, by number; pruned with the ring. */
  const sentAtMs = new Map<number, number>();
  let start = 0;
  let count = 0;
  let exchangeCount = 0;

  function add(entry: Pick<WireEntry, "direction" | "bytes" | "text" | "exchange" | "note">): number {
    count += 1;
    const atMs = clock.nowMs();
    const sent = entry.direction === "in" && entry.exchange !== undefined ? sentAtMs.get(entry.exchange) : undefined;
    const added: WireEntry = { number: count, atMs, wallMs: clock.wallMs(), tookMs: sent === undefined ? undefined : atMs - sent, ...entry };
    if (ring.length < maxEntries) ring.push(added);
    else {
      const oldest = ring[start];
      if (oldest) sentAtMs.delete(oldest.number);
      ring[start] = added;
      start = (start + 1) % maxEntries;
    }
    for (const listener of [...listeners]) listener(added);
    return count;
  }

  return {
    out(bytes) {
      exchangeCount += 1;
      sentAtMs.set(count + 1, clock.nowMs());
      return add({ direction: "out", bytes, text: printable(bytes), exchange: count + 1, note: undefined });
    },
    in(bytes, about = {}) {
      add({ direction: "in", bytes, text: printable(bytes), exchange: about.exchange, note: about.note });
    },
    event(text) {
      add({ direction: "event", bytes: new Uint8Array(0), text, exchange: undefined, note: undefined });
    },
    entries: () => [...ring.slice(start), ...ring.slice(0, start)],
    get exchangeCount() {
      return exchangeCount;
    },
    get droppedCount() {
      return count - ring.length;
    },
    onEntry(listener) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    clear() {
      ring.length = 0;
      start = 0;
      sentAtMs.clear();
    },
  };
}
