import type { ProfileDocument, ProfileMode, ProfileSlot } from "@/lib/profile/document";
import { PROFILE_FORMAT, PROFILE_VERSION } from "@/lib/profile/document";
import type { DocumentPatch } from "@/lib/profile/finding";
import { applyPatch, parsePath } from "@/lib/profile/paths";
import { nativeFromDocument } from "@/lib/serial/backup/document";
import type { NativeWrite } from "@/lib/serial/native";
import { compiledDriver } from "./compiled-driver";
import { planChanges } from "./plan-changes";
import type { Planned, PlanInput } from "./types";

export type EditInput = Omit<PlanInput, "target" | "leftOut"> & {
  /** Settings changed by hand, by the backup's own slots and modes. */
  readonly edits: readonly DocumentPatch[];
  /** Settings without a place in a profile, native. */
  readonly nativeEdits?: readonly NativeWrite[] | undefined;
};

type Touched = { readonly slots: ReadonlySet<number>; readonly modes: ReadonlySet<string>; readonly everywhere: boolean };

function touchedBy(edits: readonly DocumentPatch[]): Touched {
  const paths = edits.map(({ path }) => parsePath(path));
  return {
    slots: new Set(paths.flatMap((path) => (path?.scope === "slot" ? [path.number] : []))),
    modes: new Set(paths.flatMap((path) => (path?.scope === "mode" ? [path.key] : []))),
    everywhere: paths.some((path) => path?.scope === "document" && path.fields[0] === "everywhere"),
  };
}

/** A slot that only shares an edited mode is named with its mode alone, so that the edit reaches the mode it is on. */
function slotOf(slot: ProfileSlot, touched: Touched): ProfileSlot | null {
  if (touched.slots.has(slot.number)) return slot;
  return slot.mode !== undefined && touched.modes.has(slot.mode) ? { number: slot.number, mode: slot.mode } : null;
}

/** A profile of just what was edited: touched slots, the modes that they are on, what acts everywhere. */
function profileOfEdits(base: ProfileDocument, edits: readonly DocumentPatch[]): ProfileDocument {
  const edited = applyPatch(base, edits);
  const touched = touchedBy(edits);
  const slots = (edited.slots ?? []).flatMap((slot) => slotOf(slot, touched) ?? []);
  const onModes = new Set(slots.map((slot) => slot.mode));
  const modes = (edited.modes ?? []).filter((mode: ProfileMode) => touched.modes.has(mode.key) || onModes.has(mode.key));
  return {
    format: PROFILE_FORMAT,
    version: PROFILE_VERSION,
    ...(touched.everywhere && edited.everywhere ? { everywhere: edited.everywhere } : {}),
    modes,
    slots,
  };
}

/**
 * A plan of settings that were changed by hand: it goes the way of every plan.
 *
 * Edits with a neutral path make a profile of just these values. With native edits among them the target is the backup
 * itself with all of them changed, since a profile has no place for those.
 */
export function planEdits(input: EditInput): Planned {
  const { edits, nativeEdits = [], ...rest } = input;
  const { backup } = input;
  if (nativeEdits.length === 0) {
    return planChanges({ ...rest, leftOut: [], target: { kind: "profile", document: profileOfEdits(backup.document, edits) } });
  }
  const document = applyPatch(backup.document, edits);
  const values = {
    ...nativeFromDocument(compiledDriver(input.driver), document, backup.values),
    ...Object.fromEntries(nativeEdits.map(({ key, value }) => [key, value])),
  };
  return planChanges({ ...rest, leftOut: [], target: { kind: "restore", content: { ...backup, values, document } } });
}
