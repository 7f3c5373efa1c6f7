import { describe, expect, it } from "vitest";
import { faultLf8 } from "./drivers";
import { FAULT_KINDS, type FaultKind } from "./fault-line";
import type { Intent } from "./explore";
import { sweep } from "./sweep";

/** What is told apart before the owner's word comes is swept with the wish to keep; these reach into putting back. */
const REACHES_BACK: readonly FaultKind[] = ["reply-lost", "reply-unplug", "request-restart", "ignored", "torn", "timer", "tab"];

const intents: readonly (Intent & { readonly kinds: readonly FaultKind[] })[] = [
  { wish: "put-back", recovery: "put-back", kinds: REACHES_BACK },
  { wish: "keep", recovery: "put-back", kinds: FAULT_KINDS.filter((kind) => kind !== "stop") },
];

describe.each(intents)("an owner who wants to $wish, and puts back in doubt", ({ kinds, ...intent }) => {
  it.each(kinds)("breaks no invariant and finds an end after %s at any request", async (kind) => {
    const { cases, broken, ends } = await sweep({ definition: faultLf8, intent, powerOnSlot: 1, dirty: false }, kind);
    expect(broken).toEqual([]);
    expect(cases).toBeGreaterThan(30);
    if (intent.wish === "put-back") expect(Object.keys(ends).every((end) => end === "put-back" || end === "called-off")).toBe(true);
  });
});
