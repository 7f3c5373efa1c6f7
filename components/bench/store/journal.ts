import { reconcileJournals } from "@/lib/serial/run/reconcile-journals";
import type { JournalEntry, JournalStore } from "@/lib/serial/run/types";
import type { Clock } from "@/lib/serial/clock";

/** How long a delivery waits after the n-th failure in a row; the last one holds for all further ones. */
const RETRY_MS = [500, 1000, 2000, 5000, 10_000];
/** As many entries as the route takes at once. */
const MOST_AT_ONCE = 200;

export type JournalParts = {
  /** Keeps the whole journal where a reload finds it; throws where it can't be kept. */
  readonly keep: (entries: readonly JournalEntry[]) => void;
  /** Sends entries to the server; absent without an account. Rejects while the server is away. */
  readonly deliver?: ((entries: readonly JournalEntry[]) => Promise<void>) | undefined;
  readonly clock: Clock;
  readonly entries: readonly JournalEntry[];
};

/** A journal in browser storage that is delivered to the server when it can be: the run never waits for the server. */
export type BenchJournal = JournalStore & {
  /** Every entry so far, as it was written. */
  readonly entries: readonly JournalEntry[];
  /** Entries that the server has not got yet. */
  readonly undelivered: number;
  /** Resolves once all is delivered; at once where there is no server. */
  settled(): Promise<void>;
};

/** Makes the journal of one run. `entries` are those that stand already, on both sides. */
export function createJournal({ keep, deliver, clock, entries }: JournalParts): BenchJournal {
  let all: readonly JournalEntry[] = entries;
  let waiting: readonly JournalEntry[] = [];
  let failures = 0;
  let delivery: Promise<void> | null = null;
  const wait = (ms: number) => new Promise<void>((resolve) => { clock.after(ms, resolve); });

  async function deliverAll(send: NonNullable<JournalParts["deliver"]>): Promise<void> {
    while (waiting.length > 0) {
      const batch = waiting.slice(0, MOST_AT_ONCE);
      const delivered = await send(batch).then(() => true, () => false);
      if (delivered) {
        failures = 0;
        waiting = waiting.slice(batch.length);
      } else {
        await wait(RETRY_MS[Math.min(failures, RETRY_MS.length - 1)] ?? 0);
        failures += 1;
      }
    }
  }

  function start(): void {
    if (deliver && delivery === null) delivery = deliverAll(deliver).finally(() => { delivery = null; });
  }

  return {
    get entries() { return all; },
    get undelivered() { return waiting.length; },
    append(entry) {
      const next = [...all, entry];
      // A full or blocked storage throws: the run then sends nothing more.
      try { keep(next); } catch (cause) { return Promise.reject(cause instanceof Error ? cause : new Error(String(cause))); }
      all = next;
      if (deliver) waiting = [...waiting, entry];
      start();
      return Promise.resolve();
    },
    load: () => Promise.resolve(reconcileJournals(all)),
    async settled() { while (delivery !== null) await delivery; },
  };
}
