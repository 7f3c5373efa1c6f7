import { canonicalJson } from "./canonical";
import type { ModePlace } from "./assign-modes";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "./document";
import type { Finding } from "./finding";
import type { DeviceLimits } from "./limits";
import { findMode, modePath, slotPath } from "./paths";
import { slotsText } from "./words";

function title(mode: ProfileMode): string {
  return mode.name === undefined || mode.name === "" ? `“${mode.key}”` : `“${mode.name}”`;
}

/** No mode of the device is free for this one. */
export function noRoomFinding(mode: ProfileMode, slots: readonly ProfileSlot[], device: DeviceLimits): Finding {
  const users = slots.filter((slot) => slot.mode === mode.key).map((slot) => slot.number);
  return {
    rule: "device.mode-room",
    path: modePath(mode.key),
    severity: "stop",
    limit: device.modeCapacity,
    unit: "modes",
    sentence: `There is no room for mode ${title(mode)}.`,
    detail: `${device.name} holds ${device.modeCapacity} modes, and slots that this profile does not point elsewhere use the rest.`,
    limitSource: "driver",
    slots: users,
    remedies: users.map((slot) => ({ kind: "leave-out", label: `Leave slot ${slot} out`, slot })),
  };
}

/** A mode of the device that nobody uses is overwritten. */
export function overwriteFinding(mode: ProfileMode, place: ModePlace | undefined, base: ProfileDocument): Finding[] {
  if (place?.how !== "free") return [];
  const held = findMode(base, place.key);
  if (!held?.timing) return [];
  return [
    {
      rule: "device.mode-overwritten",
      path: modePath(place.key),
      severity: "note",
      sentence: `Mode ${place.key} of the device, ${title(held)}, is overwritten by ${title(mode)}.`,
      detail: "No slot uses it, before or after. The backup keeps it.",
      slots: [],
      remedies: [],
    },
  ];
}

/** A slot of the profile names a mode of which the profile has no timing, or nothing at all. */
export function unplacedModeFinding(slot: ProfileSlot, profile: ProfileDocument): Finding[] {
  if (slot.mode === undefined) return [];
  const mode = findMode(profile, slot.mode);
  if (mode?.timing) return [];
  const base = { path: slotPath(slot.number, "mode"), measured: slot.mode, slots: [slot.number] };
  if (mode) {
    return [
      {
        ...base,
        rule: "device.mode-without-timing",
        severity: "note",
        sentence: `Mode ${title(mode)} has no timing, so slot ${slot.number} keeps the mode that it has.`,
        remedies: [],
      },
    ];
  }
  return [
    {
      ...base,
      rule: "shape.mode-missing",
      severity: "stop",
      sentence: `Slot ${slot.number} names mode “${slot.mode}”, which the profile does not have.`,
      detail: "Point the slot to a mode of the profile, or leave it out.",
      remedies: [{ kind: "leave-out", label: `Leave slot ${slot.number} out`, slot: slot.number }],
    },
  ];
}

/** Trim reaches every slot, so it stays as it is where one is left out. */
export function sharedTrimFinding(
  base: ProfileDocument,
  profile: ProfileDocument,
  leftOut: ReadonlySet<number>,
): Finding[] {
  const asked = profile.everywhere?.trim;
  const held = base.everywhere?.trim;
  if (!asked || canonicalJson({ ...held, ...asked }) === canonicalJson(held ?? {})) return [];
  const sharers = (base.slots ?? []).map((slot) => slot.number).filter((number) => leftOut.has(number));
  return [
    {
      rule: "device.trim-shared",
      path: "everywhere.trim",
      severity: "note",
      sentence: `Trim stays as it is, since it reaches ${slotsText(sharers)} too.`,
      detail: "What a left-out slot shares is not written.",
      slots: sharers,
      remedies: [],
    },
  ];
}
