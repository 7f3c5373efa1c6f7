import type { JournalEntry } from "./types";

/** Entries of one step in the order they are made: what is known outranks what is under way. */
function isLater(a: JournalEntry, b: JournalEntry): boolean {
  const underWay = (entry: JournalEntry) => entry.kind === "request" && entry.outcome === "leaving";
  if (underWay(a) !== underWay(b)) return underWay(b);
  return a.atMs > b.atMs;
}

/**
 * One journal out of two that were kept apart (browser storage and server), or of one with several entries a step.
 *
 * @returns one entry for each step number, in order; of two the later outcome: a known one before `leaving`, else the
 * later stamp, else the one of `a`.
 */
export function reconcileJournals(
  a: readonly JournalEntry[],
  b: readonly JournalEntry[] = [],
): readonly JournalEntry[] {
  const byNumber = new Map<number, JournalEntry>();
  for (const entry of [...a, ...b]) {
    const held = byNumber.get(entry.number);
    if (held === undefined || isLater(entry, held)) byNumber.set(entry.number, entry);
  }
  return [...byNumber.values()].sort((left, right) => left.number - right.number);
}
