import { assignModes, type ModePlace } from "./assign-modes";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "./document";
import type { Finding } from "./finding";
import type { DeviceLimits } from "./limits";
import { noRoomFinding, overwriteFinding, sharedTrimFinding, unplacedModeFinding } from "./overlay-findings";
import { roundDocument } from "./round";
import { unchangedBetween, type Unchanged } from "./unchanged";
import { duplicateFindings } from "./check/duplicates";

export type Overlay = {
  /** What the device would hold, mode keys being the device's own. Not rounded yet. */
  readonly merged: ProfileDocument;
  /** The profile's mode key → the device's. */
  readonly modeMap: Readonly<Record<string, string>>;
  /** No room (stop), modes overwritten (note), values that a left-out slot shares and that are therefore kept (note). */
  readonly findings: readonly Finding[];
  readonly unchanged: Unchanged;
};

type Laid = { readonly slots: readonly ProfileSlot[]; readonly leftOut: ReadonlySet<number> };

/** Without fields that hold `undefined`: they name nothing, and would take the device's value out. */
function namedOnly<T extends object>(group: T): T {
  // The same fields but for optional ones that are absent in all but name.
  return Object.fromEntries(Object.entries(group).filter(([, value]) => value !== undefined)) as T;
}

function overlaySlot(base: ProfileSlot | undefined, named: ProfileSlot, mode: string | undefined): ProfileSlot {
  const placement = named.placement && { placement: { ...base?.placement, ...namedOnly(named.placement) } };
  const colour = named.colour && { colour: { ...base?.colour, ...namedOnly(named.colour) } };
  const { mode: _theProfilesOwn, ...values } = named;
  return { ...base, ...namedOnly(values), ...placement, ...colour, ...(mode !== undefined && { mode }) };
}

function overlaySlots(
  base: ProfileDocument,
  laid: Laid,
  deviceMode: (key: string) => string | undefined,
): ProfileSlot[] {
  const slots = new Map((base.slots ?? []).map((slot) => [slot.number, slot]));
  for (const named of laid.slots) {
    const mode = named.mode === undefined ? undefined : deviceMode(named.mode);
    slots.set(named.number, overlaySlot(slots.get(named.number), named, mode));
  }
  return [...slots.values()].sort((a, b) => a.number - b.number);
}

type ModesInput = {
  readonly base: ProfileDocument;
  readonly profile: readonly ProfileMode[];
  readonly places: ReadonlyMap<string, ModePlace>;
  readonly laid: Laid;
};

/** A mode's name is written with its timing, or where the profile's own slots use it and no left-out slot does. */
function takesName(mode: ProfileMode, place: ModePlace, { base, laid }: ModesInput): boolean {
  if (mode.name === undefined) return false;
  if (place.how !== "equal") return true;
  const shared = (base.slots ?? []).some((slot) => slot.mode === place.key && laid.leftOut.has(slot.number));
  return !shared && laid.slots.some((slot) => slot.mode === mode.key);
}

function overlayModes(input: ModesInput): ProfileMode[] {
  const modes = new Map((input.base.modes ?? []).map((mode) => [mode.key, mode]));
  for (const mode of input.profile) {
    const place = input.places.get(mode.key);
    if (!place) continue;
    const held = place.how === "equal" ? modes.get(place.key) : undefined;
    const timing = held?.timing ?? mode.timing;
    const name = takesName(mode, place, input) ? { name: mode.name } : {};
    modes.set(place.key, { ...(held ?? modes.get(place.key)), key: place.key, ...(timing && { timing }), ...name });
  }
  return [...modes.values()].sort((a, b) => Number(a.key) - Number(b.key));
}

/** Everywhere-settings reach every slot: with one left out, trim is shared with it and stays. */
function overlayEverywhere(
  base: ProfileDocument,
  profile: ProfileDocument,
  keepTrim: boolean,
): ProfileDocument["everywhere"] {
  if (!base.everywhere && !profile.everywhere) return undefined;
  const [held, named] = [base.everywhere?.trim, keepTrim ? undefined : profile.everywhere?.trim];
  const trim = held || named ? { ...held, ...namedOnly(named ?? {}) } : undefined;
  const { trim: _laidAbove, ...rest } = { ...base.everywhere, ...namedOnly(profile.everywhere ?? {}) };
  return { ...rest, ...(trim && { trim }) };
}

/** Modes that only left-out slots use are left out with them; modes that nobody uses are part of the profile. */
function modesToPlace(profile: ProfileDocument, laid: Laid): ProfileMode[] {
  const wanted = new Set(laid.slots.map((slot) => slot.mode));
  const left = new Set((profile.slots ?? []).filter((slot) => laid.leftOut.has(slot.number)).map((slot) => slot.mode));
  return (profile.modes ?? []).filter((mode) => wanted.has(mode.key) || !left.has(mode.key));
}

/**
 * Lays a profile over a backup's neutral document: what the profile names replaces what the device has, what it does
 * not name stays. A slot that is left out never changes, nor what it shares: its mode's timing, trim.
 *
 * Mode keys are looked up in the profile alone and find their place on the device as `assignModes` says. Laying the
 * same profile over the result changes nothing.
 * @param base a backup's document: its mode keys are the device's numbers
 */
export function overlay(input: {
  readonly base: ProfileDocument;
  readonly profile: ProfileDocument;
  readonly leftOut: readonly number[];
  readonly limits: DeviceLimits;
}): Overlay {
  const { base, profile, limits: device } = input;
  const leftOut = new Set(input.leftOut);
  const laid: Laid = { leftOut, slots: (profile.slots ?? []).filter((slot) => !leftOut.has(slot.number)) };
  const modes = modesToPlace(profile, laid);
  const timed = new Set(modes.filter((mode) => mode.timing !== undefined).map((mode) => mode.key));
  const pointed = new Map(
    laid.slots.flatMap((slot) =>
      slot.mode !== undefined && timed.has(slot.mode) ? [[slot.number, slot.mode] as const] : [],
    ),
  );
  const { places, noRoom } = assignModes({ base, modes, pointed, device });

  const deviceMode = (key: string) => places.get(key)?.key;
  const keepTrim = (base.slots ?? []).some((slot) => leftOut.has(slot.number));
  const everywhere = overlayEverywhere(base, profile, keepTrim);
  const madeFor = profile.madeFor ?? base.madeFor;
  const { provenance: _notOfThisDocument, ...kept } = base;
  const merged: ProfileDocument = {
    ...kept,
    ...(madeFor && { madeFor }),
    ...(everywhere && { everywhere }),
    modes: overlayModes({ base, profile: modes, places, laid }),
    slots: overlaySlots(base, laid, deviceMode),
  };
  return {
    merged,
    modeMap: Object.fromEntries([...places].map(([key, place]) => [key, place.key])),
    findings: [
      ...duplicateFindings(profile),
      ...noRoom.map((mode) => noRoomFinding(mode, laid.slots, device)),
      ...modes.flatMap((mode) => overwriteFinding(mode, places.get(mode.key), base)),
      ...laid.slots.flatMap((slot) => unplacedModeFinding(slot, profile)),
      ...(keepTrim ? sharedTrimFinding(base, profile, leftOut) : []),
    ],
    unchanged: unchangedBetween(roundDocument(base, device).document, roundDocument(merged, device).document),
  };
}
