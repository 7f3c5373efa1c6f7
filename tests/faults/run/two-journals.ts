import { reconcileJournals } from "@/lib/serial/run/reconcile-journals";
import type { JournalEntry, JournalStore } from "@/lib/serial/run/types";

/** A run's journal on both sides. The server has each entry when the browser sends it: what it never got is not looked at here. */
export type TwoJournals = {
  readonly store: JournalStore;
  /** What the browser's storage holds. */
  readonly browser: readonly JournalEntry[];
  /** What the server holds. */
  readonly server: readonly JournalEntry[];
  /** The page goes: what it appends afterwards reaches nobody. @returns both sides drawn together, as the next page has them */
  reopen(): TwoJournals;
  /** The browser is gone for good: only the server's side is left. */
  loseBrowser(): void;
};

/** Two sides that begin with these entries. */
export function twoJournals(held: readonly JournalEntry[] = []): TwoJournals {
  let browser: JournalEntry[] = [...held];
  const server: JournalEntry[] = [...held];
  let open = true;
  return {
    store: {
      append(entry) {
        if (open) {
          browser.push(entry);
          server.push(entry);
        }
        return Promise.resolve();
      },
      load: () => Promise.resolve(reconcileJournals(browser, server)),
    },
    get browser() {
      return browser;
    },
    server,
    reopen() {
      open = false;
      return twoJournals(reconcileJournals(browser, server));
    },
    loseBrowser() {
      browser = [];
    },
  };
}
