import { describe, expect, test } from "vitest";
import { createJournal } from "@/components/bench/store/journal";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { JournalEntry } from "@/lib/serial/run/types";

const entry = (number: number): JournalEntry => ({ number, atMs: number, kind: "state", state: "writing" });

describe("the journal of a run in the page", () => {
  test("keeps an entry in the browser before anything else, and delivers it", async () => {
    const clock = createVirtualClock();
    const kept: number[] = [];
    const delivered: number[] = [];
    const journal = createJournal({ clock, entries: [], keep: (all) => kept.push(all.length), deliver: (batch) => { delivered.push(...batch.map((one) => one.number)); return Promise.resolve(); } });
    await journal.append(entry(1));
    await clock.run(journal.settled());
    expect(kept).toEqual([1]);
    expect(delivered).toEqual([1]);
  });

  test("goes on while the server is away, and delivers everything once, in order, when it is back", async () => {
    const clock = createVirtualClock();
    let isAway = true;
    const delivered: number[] = [];
    const journal = createJournal({
      clock, entries: [], keep: () => undefined,
      deliver: (batch) => {
        if (isAway) return Promise.reject(new Error("away"));
        delivered.push(...batch.map((one) => one.number));
        return Promise.resolve();
      },
    });
    for (let number = 1; number <= 5; number += 1) await journal.append(entry(number));
    expect(journal.undelivered).toBe(5);
    clock.after(3000, () => { isAway = false; });
    await clock.run(journal.settled());
    expect(delivered).toEqual([1, 2, 3, 4, 5]);
    expect(journal.undelivered).toBe(0);
  });

  test("refuses an entry that the browser cannot keep, so that nothing more is sent", async () => {
    const journal = createJournal({ clock: createVirtualClock(), entries: [], keep: () => { throw new Error("full"); } });
    await expect(journal.append(entry(1))).rejects.toThrow("full");
    expect(await journal.load()).toEqual([]);
  });
});
