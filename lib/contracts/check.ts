import { z } from "zod";
import {
  profileDocumentSchema,
  rasterTimingSchema,
  screenEnvelopeSchema,
  sourceFormatSchema,
} from "@/lib/profile/document";
import { valueChange } from "@/lib/contracts/backup";
import { findingSchema } from "@/lib/contracts/finding";

const span = z.tuple([z.number(), z.number()]);
const numberLimit = z.object({
  min: z.number(),
  max: z.number(),
  step: z.number().positive(),
  unit: z.string().optional(),
});
const idleRaster = z.union([rasterTimingSchema, z.literal("unknown")]);
const count = z.number().int();

/** The shape of `DeviceLimits` in `lib/profile`. */
export const deviceLimitsSchema = z.object({
  name: z.string().max(120),
  numbers: z.record(z.string(), numberLimit),
  choices: z.record(z.string(), z.array(z.string())),
  texts: z.record(z.string(), z.object({ maxLength: count.min(0), characters: z.string() })),
  firstSlot: count,
  slotCapacity: count.min(0).max(256),
  firstMode: count,
  modeCapacity: count.min(0).max(256),
  clockHz: numberLimit,
  horizontalMultiple: count.min(1),
  maxLineTotal: count.optional(),
  maxFieldLines: count.optional(),
  interlace: z.boolean(),
  inputs: z.array(
    z.object({
      name: z.string(),
      label: z.string(),
      accepts: z.array(
        z.object({
          activeLines: span.optional(),
          interlaced: z.boolean().optional(),
          fieldRateHz: span.optional(),
          locks: z.enum(["locks", "does-not-lock", "unknown"]),
        }),
      ),
    }),
  ),
  outputKinds: z.array(z.enum(["RGB", "YPbPr"])),
  syncOutputs: z.array(
    z.object({
      kind: z.enum(["separate", "composite", "onGreen", "onLuma"]),
      vpp: z.number().optional(),
      sourceOhm: z.number().optional(),
    }),
  ),
  outsideRaster: z.enum(["refuses", "cuts"]),
  outputClock: z.enum(["free", "input"]),
  lineFilter: z.enum(["nearest", "linear", "area", "smooth"]).optional(),
  idle: z.object({ switchOn: idleRaster, withoutInput: idleRaster, afterReset: idleRaster }),
  firmware: z.object({ min: z.string(), max: z.string(), running: z.string().optional() }),
});

export const checkRequest = z.object({
  document: profileDocumentSchema,
  /** Slots and modes that stay as they are. */
  unchanged: z
    .object({ slots: z.array(count).max(256).default([]), modes: z.array(z.string().max(64)).max(256).default([]) })
    .optional(),
  /** Limits, or the slug of a driver. */
  device: z.union([z.string().max(64), deviceLimitsSchema]).optional(),
  screen: screenEnvelopeSchema.optional(),
  source: sourceFormatSchema.optional(),
});
export type CheckRequest = z.input<typeof checkRequest>;
/** `ok`: no stop. */
export const checkAnswer = z.object({ ok: z.boolean(), findings: z.array(findingSchema) });

export const compareRequest = z.object({ left: profileDocumentSchema, right: profileDocumentSchema });
export const compareAnswer = z.object({ changes: z.array(valueChange) });

export const convertQuery = z.object({ to: z.literal("json") });
