import { createStore, type StoreApi } from "zustand/vanilla";
import type { Clock } from "@/lib/serial/clock";
import { hexOf, type WireEntry, type WireLog } from "@/lib/serial/wire-log";

/** The log is drawn at most this often, however fast the wire is. */
const DRAW_MS = 120;

/** A stretch of wall time: what a run's step put on the wire. Both ends inclusive. */
export type WireStretch = { readonly fromMs: number; readonly toMs: number };

/** What the drawer shows of the ring. */
export type WireShown = {
  readonly isOpen: boolean;
  /** Entries that the filter lets through, oldest first; all that the ring holds. */
  readonly entries: readonly WireEntry[];
  /** Requests ever logged. */
  readonly total: number;
  readonly filter: string;
  readonly search: string;
  /** Places in `entries` that have the searched text in them. */
  readonly matches: readonly number[];
  readonly isPaused: boolean;
  /** Entries that came while it was paused. */
  readonly newer: number;
  /** Marked. */
  readonly stretch: WireStretch | null;
  /** Which of the matches was gone to; -1: none yet. */
  readonly hit: number;
  /** A place in `entries` to bring into sight, a new object each time; null: follow the newest. */
  readonly sight: { readonly index: number } | null;
};

export type WireView = {
  readonly store: StoreApi<WireShown>;
  setOpen(isOpen: boolean): void;
  setFilter(filter: string): void;
  setSearch(search: string): void;
  setPaused(isPaused: boolean): void;
  /** Goes to the next match, or the one before, round and round; the log is held still. */
  goToHit(step: 1 | -1): void;
  /** Opens on the bytes of a stretch of time: unfiltered, and held still. */
  showStretch(stretch: WireStretch): void;
  /** Follows the log. @returns what ends it; no timer is left behind */
  follow(): () => void;
};

/** What is searched in, made once for an entry. It goes with the entry. */
const haystacks = new WeakMap<WireEntry, string>();

function haystackOf(entry: WireEntry): string {
  const known = haystacks.get(entry) ?? `${entry.text} (${entry.note ?? ""})\n${hexOf(entry.bytes)}`.toUpperCase();
  haystacks.set(entry, known);
  return known;
}

const has = (entry: WireEntry, wanted: string) => haystackOf(entry).includes(wanted);
const wantedOf = (text: string) => text.trim().toUpperCase();

function matchesOf(entries: readonly WireEntry[], search: string): number[] {
  const wanted = wantedOf(search);
  return wanted === "" ? [] : entries.flatMap((entry, index) => (has(entry, wanted) ? [index] : []));
}

/** Whether an entry lies in a stretch. */
export function isInStretch({ wallMs }: WireEntry, stretch: WireStretch | null): boolean {
  return stretch !== null && wallMs >= stretch.fromMs && wallMs <= stretch.toMs;
}

/**
 * A view of the wire log: filter, search, pause. Only what is new is looked at, and it is told of at most every 120 ms.
 *
 * It holds no more entries than the ring.
 */
export function createWireView(log: WireLog, clock: Pick<Clock, "after">): WireView {
  const store = createStore<WireShown>(() => ({ isOpen: false, entries: [], total: 0, filter: "", search: "", matches: [], isPaused: false, newer: 0, stretch: null, hit: -1, sight: null }));
  let seen = 0;

  function filtered(entries: readonly WireEntry[], filter: string): WireEntry[] {
    const wanted = wantedOf(filter);
    return wanted === "" ? [...entries] : entries.filter((entry) => has(entry, wanted));
  }

  function catchUp(): void {
    const state = store.getState();
    const all = log.entries();
    const last = all.at(-1)?.number ?? 0;
    if (state.isPaused) return store.setState({ newer: Math.max(0, last - seen), total: log.exchangeCount });
    const first = all[0]?.number ?? Infinity;
    // Numbers count up by one, so what is new is a tail of known length.
    const fresh = last - seen < all.length ? all.slice(all.length - (last - seen)) : all;
    const kept = state.entries.filter((entry) => entry.number >= first);
    const entries = [...kept, ...filtered(fresh, state.filter)];
    seen = last;
    store.setState({ entries, matches: matchesOf(entries, state.search), total: log.exchangeCount, newer: 0 });
  }

  /** Looks through the whole ring again. While paused it is the ring as it stood then. */
  function again(change: Partial<WireShown>): void {
    store.setState(change);
    const { filter, search, isPaused } = store.getState();
    const all = log.entries();
    const entries = filtered(isPaused ? all.filter((entry) => entry.number <= seen) : all, filter);
    if (!isPaused) seen = all.at(-1)?.number ?? 0;
    store.setState({ entries, matches: matchesOf(entries, search), total: log.exchangeCount, newer: (all.at(-1)?.number ?? 0) - seen });
  }

  return {
    store,
    setOpen: (isOpen) => store.setState({ isOpen }),
    setFilter: (filter) => again({ filter }),
    setSearch: (search) => store.setState(({ entries }) => ({ search, matches: matchesOf(entries, search), hit: -1 })),
    setPaused: (isPaused) => again({ isPaused, ...(isPaused ? {} : { stretch: null, sight: null, hit: -1 }) }),
    goToHit(step) {
      again({ isPaused: true });
      const { matches, hit } = store.getState();
      if (matches.length === 0) return;
      const next = hit < 0 ? (step > 0 ? 0 : matches.length - 1) : (hit + step + matches.length) % matches.length;
      store.setState({ hit: next, sight: { index: matches[next] ?? 0 }, stretch: null });
    },
    showStretch(stretch) {
      again({ isPaused: false, filter: "" });
      const index = store.getState().entries.findIndex((entry) => isInStretch(entry, stretch));
      store.setState({ isOpen: true, isPaused: true, stretch, sight: index < 0 ? null : { index } });
    },
    follow() {
      let timer: (() => void) | null = null;
      const stop = log.onEntry(() => {
        timer ??= clock.after(DRAW_MS, () => { timer = null; catchUp(); });
      });
      again({});
      return () => { stop(); timer?.(); timer = null; };
    },
  };
}
