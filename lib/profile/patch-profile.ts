import { sameRaster } from "@/lib/timing/same-raster";
import type { ProfileDocument } from "./document";
import type { DocumentPatch } from "./finding";
import { applyPatch, findMode, modePath, parsePath } from "./paths";

/** A profile as it lies on a device: what `overlay` gave, and the profile that it was given. */
export type LaidProfile = {
  readonly profile: ProfileDocument;
  readonly merged: ProfileDocument;
  /** The profile's mode key → the device's. */
  readonly modeMap: Readonly<Record<string, string>>;
};

/** A key that the profile does not use yet. Bounded by the modes of a document. */
function freeKey(profile: ProfileDocument, deviceKey: string): string {
  const taken = new Set((profile.modes ?? []).map(({ key }) => key));
  const wanted = `device-${deviceKey}`;
  let key = wanted;
  for (let count = 2; taken.has(key); count += 1) key = `${wanted}-${count}`;
  return key;
}

/** The profile's key for a mode of the device; a mode that the profile lacks is taken over from the device, timing and all. */
function profileKey(laid: LaidProfile, deviceKey: string): { profile: ProfileDocument; key: string } {
  const { profile } = laid;
  const own = Object.entries(laid.modeMap).find(([key, at]) => at === deviceKey && findMode(profile, key));
  if (own) return { profile, key: own[0] };
  const timing = findMode(laid.merged, deviceKey)?.timing;
  if (!timing) return { profile, key: deviceKey };
  const equal = (profile.modes ?? []).find((mode) => mode.timing && sameRaster(mode.timing, timing));
  if (equal) return { profile, key: equal.key };
  const key = freeKey(profile, deviceKey);
  return { profile: { ...profile, modes: [...(profile.modes ?? []), { key, timing }] }, key };
}

function patchOne(laid: LaidProfile, patch: DocumentPatch): ProfileDocument {
  const path = parsePath(patch.path);
  if (path?.scope === "mode") {
    const { profile, key } = profileKey(laid, path.key);
    return applyPatch(profile, [{ ...patch, path: modePath(key, path.fields.join(".")) }]);
  }
  if (path?.scope === "slot" && path.fields.join(".") === "mode" && typeof patch.value === "string") {
    const { profile, key } = profileKey(laid, patch.value);
    return applyPatch(profile, [{ ...patch, value: key }]);
  }
  return applyPatch(laid.profile, [patch]);
}

/**
 * Applies a patch of a finding, which names modes by the device's numbers, to the profile that was laid over the
 * device, which names them by its own keys.
 *
 * A mode of the device that the profile does not have is added to it, so that the next overlay finds it there.
 */
export function patchProfile(laid: LaidProfile, patches: readonly DocumentPatch[]): ProfileDocument {
  return patches.reduce((profile, patch) => patchOne({ ...laid, profile }, patch), laid.profile);
}
