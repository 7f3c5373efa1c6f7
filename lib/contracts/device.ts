import { z } from "zod";
import { rasterTimingSchema } from "@/lib/profile/document";
import { idSchema, lineText, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";

export const driverRef = z.object({ slug: z.string().min(1).max(64), version: z.string().min(1).max(16) });

/** Without a serial number the identity is a guess: the owner said which device it is. */
export const newDevice = z.object({
  name: lineText(80),
  driver: driverRef,
  maker: lineText(80),
  model: lineText(80),
  serialNumber: lineText(64).optional(),
  firmware: lineText(32),
  simulated: z.boolean(),
  screenId: idSchema.optional(),
});
export type NewDevice = z.input<typeof newDevice>;

/** What is missing stays; a null screen takes it away. */
export const deviceChange = z.object({
  name: lineText(80).optional(),
  screenId: idSchema.nullable().optional(),
  firmware: lineText(32).optional(),
});
export type DeviceChange = z.input<typeof deviceChange>;

/** With both, the list has the one device that it is, or none. */
export const deviceQuery = pageQuery.extend({
  driverSlug: z.string().max(64).optional(),
  serialNumber: z.string().max(64).optional(),
});
export type DeviceQuery = z.infer<typeof deviceQuery>;

export const deviceView = z.object({
  id: idSchema,
  name: z.string(),
  driver: driverRef,
  maker: z.string(),
  model: z.string(),
  serialNumber: z.string().nullable(),
  firmware: z.string(),
  simulated: z.boolean(),
  screen: z.object({ id: idSchema, name: z.string() }).nullable(),
  knownGoodBackupId: idSchema.nullable(),
  lastBackup: z
    .object({
      id: idSchema,
      name: z.string(),
      takenAt: timeSchema,
      activeSlot: z.number().int(),
      rasterOut: rasterTimingSchema.nullable(),
    })
    .nullable(),
  /** Whether the last backup says the same as the known-good one. Null without either. */
  differsFromKnownGood: z.boolean().nullable(),
  openRun: z.object({ id: idSchema, state: z.string() }).nullable(),
  version: z.number().int(),
  createdAt: timeSchema,
});
export type DeviceView = z.infer<typeof deviceView>;
export const devicePage = pageOf(deviceView);
