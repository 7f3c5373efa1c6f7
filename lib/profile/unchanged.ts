import { canonicalJson } from "./canonical";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "./document";

/** Slots and modes that stay as they are: what is wrong with them is a caution at most. */
export type Unchanged = { readonly slots: readonly number[]; readonly modes: readonly string[] };

function same(left: unknown, right: unknown): boolean {
  return canonicalJson(left ?? null) === canonicalJson(right ?? null);
}

/** What a slot expects is a note for the owner: the device holds nothing of it. */
function held(slot: ProfileSlot | undefined): object | undefined {
  return slot && { ...slot, expects: undefined };
}

function timingsOf(modes: readonly ProfileMode[]): ReadonlyMap<string, ProfileMode["timing"]> {
  return new Map(modes.map((mode) => [mode.key, mode.timing]));
}

/**
 * What `merged` leaves as `base` has it: slots whose own values and whose mode's timing are the same, and modes that
 * are the same and that no changed slot uses.
 */
export function unchangedBetween(base: ProfileDocument, merged: ProfileDocument): Unchanged {
  const [before, after] = [timingsOf(base.modes ?? []), timingsOf(merged.modes ?? [])];
  const slotsBefore = new Map((base.slots ?? []).map((slot) => [slot.number, slot]));
  const modesBefore = new Map((base.modes ?? []).map((mode) => [mode.key, mode]));
  const changed = (merged.slots ?? []).filter((slot) => {
    const timingSame = slot.mode === undefined || same(before.get(slot.mode), after.get(slot.mode));
    return !timingSame || !same(held(slotsBefore.get(slot.number)), held(slot));
  });
  const changedNumbers = new Set(changed.map((slot) => slot.number));
  const usedByChanged = new Set(changed.map((slot) => slot.mode));
  const stays = (mode: ProfileMode) => !usedByChanged.has(mode.key) && same(modesBefore.get(mode.key), mode);
  return {
    slots: (merged.slots ?? []).map((slot) => slot.number).filter((number) => !changedNumbers.has(number)),
    modes: (merged.modes ?? []).filter(stays).map((mode) => mode.key),
  };
}
