import { fail, ok, type Result } from "@/lib/result";
import { MAX_MODES, PROFILE_FORMAT, PROFILE_VERSION, type ProfileDocument } from "@/lib/profile/document";
import type { RasterTiming } from "@/lib/timing/raster";

export type NamedMode = { readonly name: string; readonly timing: RasterTiming };

/** A new document with this mode alone. */
export function documentWithMode(title: string, mode: NamedMode): ProfileDocument {
  return {
    format: PROFILE_FORMAT,
    version: PROFILE_VERSION,
    title,
    modes: [{ key: "1", name: mode.name, timing: mode.timing }],
  };
}

/** The lowest number that is no key yet. */
function freeKey(keys: readonly string[]): string {
  // Bound: one of as many numbers as there are keys, and one more, is free.
  const free = Array.from({ length: keys.length + 1 }, (_, index) => String(index + 1)).find(
    (key) => !keys.includes(key),
  );
  return free ?? String(keys.length + 1);
}

/**
 * A document with a mode more, or with the timing of one of its modes replaced; everything else of it stays.
 *
 * Provenance was that of the revision before, so it goes. Errors: `full` where there is no room, `absent` where the mode
 * to replace is gone.
 */
export function withMode(
  document: ProfileDocument,
  mode: NamedMode,
  replaces: string | null,
): Result<ProfileDocument, "full" | "absent"> {
  const { provenance: _ofTheOneBefore, ...kept } = document;
  const modes = document.modes ?? [];
  if (replaces === null) {
    if (modes.length >= MAX_MODES) return fail("full");
    return ok({
      ...kept,
      modes: [...modes, { key: freeKey(modes.map(({ key }) => key)), name: mode.name, timing: mode.timing }],
    });
  }
  if (!modes.some(({ key }) => key === replaces)) return fail("absent");
  return ok({
    ...kept,
    modes: modes.map((one) => (one.key === replaces ? { ...one, name: mode.name, timing: mode.timing } : one)),
  });
}
