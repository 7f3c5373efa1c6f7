import { z } from "zod";
import { profileDocumentSchema, rasterTimingSchema, sourceFormatSchema } from "@/lib/profile/document";
import { driverRef } from "@/lib/contracts/device";
import { idSchema, lineText, pageOf, timeSchema } from "@/lib/contracts/page";

/** The most settings that a driver can have, over all its slots and modes. */
const maxValues = 32_768;

const nativeKey = z.string().min(1).max(160);
const nativeValue = z.union([z.number().int(), z.string().max(128)]);
const nativeValues = z
  .record(nativeKey, nativeValue)
  .refine((values) => Object.keys(values).length <= maxValues, `has more than ${maxValues} values`);

export const backupCause = z.enum(["by-hand", "before-run", "after-run"]);

/** A whole read as taken. The neutral document is made from the values by the server. */
export const newBackup = z.object({
  name: lineText(120).optional(),
  cause: backupCause,
  takenAt: timeSchema,
  content: z.object({ driver: driverRef, values: nativeValues, unreadable: z.array(nativeKey).max(maxValues) }),
  firmware: lineText(32),
  activeSlot: z.number().int().min(0),
  arriving: sourceFormatSchema.nullable(),
  rasterOut: rasterTimingSchema.nullable(),
});
export type NewBackup = z.input<typeof newBackup>;

export const backupView = z.object({
  id: idSchema,
  deviceId: idSchema,
  name: z.string(),
  cause: backupCause,
  takenAt: timeSchema,
  firmware: z.string(),
  activeSlot: z.number().int(),
  arriving: sourceFormatSchema.nullable(),
  rasterOut: rasterTimingSchema.nullable(),
  /** Equal content has an equal hash. */
  contentHash: z.string(),
  knownGood: z.boolean(),
  /** Plans that rest on it or lead to it: it cannot be deleted while there is one. */
  plans: z.number().int(),
  /** Native values that differ from the backup before it. Null for the first. */
  changedValues: z.number().int().nullable(),
  version: z.number().int(),
});
export type BackupView = z.infer<typeof backupView>;
export const backupPage = pageOf(backupView);

/** The content of a backup: what a restore and a plan rest on. */
export const backupContentView = z.object({
  driver: driverRef,
  values: z.record(z.string(), nativeValue),
  unreadable: z.array(z.string()),
  document: profileDocumentSchema,
});

export const backupDetail = backupView.extend({ content: backupContentView });
export type BackupDetail = z.infer<typeof backupDetail>;

export const backupChange = z.object({ name: lineText(120) });
export type BackupChange = z.input<typeof backupChange>;

/** What changed from `id` to `with`: neutral paths, and the native settings that have none. */
export const backupCompareQuery = z.object({ with: idSchema });

/** One value that differs; null stands for "not named". The unit is empty for texts and words. */
export const valueChange = z.object({ path: z.string(), left: z.unknown(), right: z.unknown(), unit: z.string() });
export const backupComparison = z.object({
  left: backupView.pick({ id: true, deviceId: true, name: true, takenAt: true }),
  right: backupView.pick({ id: true, deviceId: true, name: true, takenAt: true }),
  changes: z.array(valueChange),
  native: z.array(z.object({ key: z.string(), left: nativeValue.optional(), right: nativeValue.optional() })),
});
export type BackupComparison = z.infer<typeof backupComparison>;
