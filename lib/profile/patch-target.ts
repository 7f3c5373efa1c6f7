import type { ProfileDocument, ProfileMode } from "@/lib/profile/document";
import type { DocumentPatch } from "@/lib/profile/finding";
import { applyPatch, findMode, modePath, parsePath } from "@/lib/profile/paths";

export type PatchedTarget = {
  readonly document: ProfileDocument;
  /** The remedy's patches in the profile's own terms. */
  readonly patches: readonly DocumentPatch[];
  /** Modes of the device that the document had to take over, so that a slot can point at one. */
  readonly added: readonly string[];
};

/** A key that no mode of the document has: the device's own number where it is free. */
function freeKey(document: ProfileDocument, wanted: string): string {
  const taken = new Set((document.modes ?? []).map((mode) => mode.key));
  let key = wanted;
  // Bounded by the number of modes: one of so many names is free.
  for (let n = 1; taken.has(key); n += 1) key = `${wanted}-${n}`;
  return key;
}

/**
 * Applies the patches of a remedy to the profile that led to the merged document.
 *
 * A remedy speaks of the merged document, whose modes have the device's keys; a profile has keys of its own.
 * @param modeMap profile key → device key, as the overlay gave it
 * @returns the profile with the values set. A device mode that the profile has no word for is taken over whole: the
 * overlay finds its place again by its timing.
 */
export function patchTarget(
  target: ProfileDocument,
  merged: ProfileDocument,
  modeMap: Readonly<Record<string, string>>,
  patches: readonly DocumentPatch[],
): PatchedTarget {
  const ownKeys = new Map(Object.entries(modeMap).map(([own, device]) => [device, own]));
  const added: string[] = [];
  const own: DocumentPatch[] = [];
  let document = target;
  const ownKey = (deviceKey: string): string => {
    const known = ownKeys.get(deviceKey);
    if (known !== undefined) return known;
    const key = freeKey(document, deviceKey);
    const mode: ProfileMode = { ...findMode(merged, deviceKey), key };
    document = { ...document, modes: [...(document.modes ?? []), mode] };
    ownKeys.set(deviceKey, key);
    added.push(key);
    return key;
  };
  for (const patch of patches) {
    const parsed = parsePath(patch.path);
    const isMode = parsed?.scope === "slot" && parsed.fields[0] === "mode" && typeof patch.value === "string";
    const path = parsed?.scope === "mode" ? modePath(ownKey(parsed.key), parsed.fields.join(".")) : patch.path;
    const value = isMode ? ownKey(String(patch.value)) : patch.value;
    own.push({ path, value });
    document = applyPatch(document, [{ path, value }]);
  }
  return { document, patches: own, added };
}
