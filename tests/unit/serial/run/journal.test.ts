import { describe, expect, it } from "vitest";
import fc from "fast-check";
import { reconcileJournals } from "@/lib/serial/run/reconcile-journals";
import { FACTS_AT_START, factsAfter, factsFrom } from "@/lib/serial/run/run-facts";
import type { JournalEntry } from "@/lib/serial/run/types";

type RequestEntry = JournalEntry & { kind: "request" };

function request(number: number, request: RequestEntry["request"], outcome: RequestEntry["outcome"], atMs = number): JournalEntry {
  return { number, atMs, kind: "request", direction: "forward", request, outcome };
}

describe("reconcileJournals", () => {
  it("takes the known outcome of a step before the one under way, whichever journal holds it", () => {
    const early = request(1, "write", "leaving", 90);
    const late = request(1, "write", "done", 10);
    expect(reconcileJournals([early], [late])).toEqual([late]);
    expect(reconcileJournals([late], [early])).toEqual([late]);
  });

  it("takes the later of two known outcomes", () => {
    const unknown = request(3, "write", "unknown", 10);
    const done = request(3, "write", "done", 20);
    expect(reconcileJournals([done], [unknown])).toEqual([done]);
    expect(reconcileJournals([unknown], [done])).toEqual([done]);
  });

  it("joins steps that only one journal has, by number", () => {
    const all = [1, 2, 3, 4].map((number) => request(number, "write", "done"));
    expect(reconcileJournals([all[3], all[0]].flatMap((e) => e ?? []), [all[1], all[2]].flatMap((e) => e ?? []))).toEqual(all);
  });

  it("gives the same journal in either order and twice over (property)", () => {
    const outcome = fc.constantFrom("leaving", "done", "refused", "unknown", "mismatch") as fc.Arbitrary<RequestEntry["outcome"]>;
    const entry = fc.tuple(fc.integer({ min: 1, max: 8 }), outcome, fc.uniqueArray(fc.nat(1000), { minLength: 1, maxLength: 1 }))
      .map(([number, what, [atMs]]) => request(number, "write", what, (atMs ?? 0) * 10 + number));
    fc.assert(fc.property(fc.uniqueArray(entry, { selector: (e) => e.atMs }), fc.uniqueArray(entry, { selector: (e) => e.atMs }), (a, b) => {
      const stamps = new Set(a.map((e) => e.atMs));
      const apart = b.filter((e) => !stamps.has(e.atMs));
      const once = reconcileJournals(a, apart);
      expect(reconcileJournals(apart, a)).toEqual(once);
      expect(reconcileJournals(once, a)).toEqual(once);
    }));
  });
});

describe("what a journal proves", () => {
  it("says that a commit may have left as soon as its entry stands, whatever its outcome", () => {
    for (const outcome of ["leaving", "unknown", "refused", "done"] as const) {
      expect(factsFrom([request(1, "commit", outcome)]).commitSent).toBe(true);
    }
  });

  it("makes the boot count void by a write and keeps it over a commit", () => {
    const counted: JournalEntry = { number: 2, atMs: 2, kind: "boot-count", bootCount: 7 };
    expect(factsFrom([request(1, "write", "done"), counted, request(3, "commit", "done")]).bootCount).toBe(7);
    expect(factsFrom([counted, request(3, "write", "leaving")]).bootCount).toBeNull();
  });

  it("makes the owner's statement void by a write and by a commit", () => {
    const stated: JournalEntry = { number: 1, atMs: 1, kind: "stated-cycle" };
    expect(factsFrom([stated]).statedCycle).toBe(true);
    expect(factsFrom([stated, request(2, "commit", "leaving")]).statedCycle).toBe(false);
    expect(factsFrom([stated, request(2, "write", "leaving")]).statedCycle).toBe(false);
  });

  it("stays muted until an unmute is known to have arrived", () => {
    const mute = (number: number, muteOn: boolean, outcome: RequestEntry["outcome"]): JournalEntry => ({
      ...(request(number, "mute", outcome) as RequestEntry), muteOn,
    });
    expect(factsFrom([mute(1, true, "leaving")]).muted).toBe(true);
    expect(factsFrom([mute(1, true, "done"), mute(2, false, "unknown")]).muted).toBe(true);
    expect(factsFrom([mute(1, true, "done"), mute(2, false, "done")]).muted).toBe(false);
  });

  it("counts on from the highest step number", () => {
    expect(factsAfter(FACTS_AT_START, request(41, "arm", "done")).nextNumber).toBe(42);
  });
});
