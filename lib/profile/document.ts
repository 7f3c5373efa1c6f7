import { z } from "zod";

/**
 * The neutral profile document, version 1 (`.porch.json`).
 *
 * Every value is optional but keys and numbers: what a profile does not name stays as it is on the device.
 * Paths in findings, changes and native keys name slots by their number and modes by their key:
 * `slots[4].placement.offsetPx`, `modes[a].timing`. Only a shape error of an imported file counts array positions.
 */
export const PROFILE_FORMAT = "backporch-profile";
export const PROFILE_VERSION = 1;

/** Import limits. Source: the project's own rule for documents from strangers. */
export const MAX_DOCUMENT_BYTES = 1024 * 1024;
export const MAX_DOCUMENT_DEPTH = 64;
export const MAX_MODES = 256;
export const MAX_SLOTS = 256;

const whole = z.number().int();
const finite = z.number().finite();
/** No control characters (C0, DEL, C1): a name goes to a device's line protocol and onto paper. */
const plainText = (longest: number) =>
  z
    .string()
    .max(longest)
    .regex(/^\P{Cc}*$/u, "has control characters");

export const polaritySchema = z.enum(["positive", "negative"]);
export const axisTimingSchema = z.looseObject({
  active: whole,
  frontPorch: whole,
  sync: whole,
  backPorch: whole,
  polarity: polaritySchema,
});
export const rasterTimingSchema = z.looseObject({
  pixelClockHz: finite,
  interlaced: z.boolean(),
  equalFields: z.boolean().optional(),
  horizontal: axisTimingSchema,
  vertical: axisTimingSchema,
});
export const sourceFormatSchema = z.looseObject({
  activePx: whole,
  activeLines: whole,
  interlaced: z.boolean(),
  fieldRateHz: finite,
  /** How often each native line was already repeated on the way here (2 = line-doubled). */
  nativeRepeat: whole.min(1).max(16).optional(),
});
/** Source px and source lines cut from each edge; negative adds black. */
export const trimSchema = z.looseObject({
  leftPx: whole.optional(),
  rightPx: whole.optional(),
  topLines: whole.optional(),
  bottomLines: whole.optional(),
});
/** Size in % of the active raster; offset of its centre in px and field lines, right and down positive. */
export const placementSchema = z.looseObject({
  widthPct: finite.optional(),
  heightPct: finite.optional(),
  offsetPx: whole.optional(),
  offsetLines: whole.optional(),
});
export const syncKindSchema = z.enum(["separate", "composite", "onGreen", "onLuma"]);
export const outputKindSchema = z.enum(["RGB", "YPbPr"]);
export const inputRangeSchema = z.enum(["full", "limited"]);
export const lineFilterSchema = z.enum(["nearest", "linear", "area", "smooth"]);
/** 100 % is unchanged. */
export const colourSchema = z.looseObject({
  brightnessPct: finite.optional(),
  contrastPct: finite.optional(),
  saturationPct: finite.optional(),
});
export const profileModeSchema = z.looseObject({
  key: plainText(64).min(1),
  name: plainText(64).optional(),
  timing: rasterTimingSchema.optional(),
});
export const profileSlotSchema = z.looseObject({
  number: whole.min(0),
  name: plainText(64).optional(),
  input: plainText(64).optional(),
  expects: sourceFormatSchema.optional(),
  /** Key of a mode of this document. */
  mode: plainText(64).optional(),
  placement: placementSchema.optional(),
  syncKind: syncKindSchema.optional(),
  outputKind: outputKindSchema.optional(),
  inputRange: inputRangeSchema.optional(),
  colour: colourSchema.optional(),
  lineFilter: lineFilterSchema.optional(),
});
const spanSchema = z.tuple([finite, finite]);
export const screenEnvelopeSchema = z.looseObject({
  name: plainText(80),
  bands: z.array(z.looseObject({ lineRateHz: spanSchema, fieldRateHz: spanSchema })).max(16),
  interlace: z.boolean().optional(),
  maxPixelClockHz: finite.positive().optional(),
  syncKinds: z.array(syncKindSchema).max(4).optional(),
  syncVpp: spanSchema.optional(),
  loadOhm: finite.positive().optional(),
  minSyncUs: finite.nonnegative().optional(),
  minBackPorchUs: finite.nonnegative().optional(),
  minFieldBlankUs: finite.nonnegative().optional(),
  aspect: z
    .string()
    .regex(/^\d{1,2}:\d{1,2}$/u)
    .optional(),
  /** What the frame hides at each edge, in % of the active raster. */
  visiblePct: z.looseObject({ left: finite, right: finite, top: finite, bottom: finite }).optional(),
  sources: z.record(z.string(), z.enum(["service-literature", "edid", "standard", "measured", "guess"])).optional(),
});
export const profileDocumentSchema = z.looseObject({
  format: z.literal(PROFILE_FORMAT),
  version: z.literal(PROFILE_VERSION),
  title: plainText(120).optional(),
  summary: z.string().max(500).optional(),
  notes: z.string().max(20_000).optional(),
  madeFor: z
    .looseObject({
      screen: screenEnvelopeSchema.optional(),
      driver: z.looseObject({ slug: plainText(64), firmware: plainText(32).optional() }).optional(),
    })
    .optional(),
  everywhere: z.looseObject({ trim: trimSchema.optional(), powerOnSlot: whole.optional() }).optional(),
  modes: z.array(profileModeSchema).max(MAX_MODES).optional(),
  slots: z.array(profileSlotSchema).max(MAX_SLOTS).optional(),
  provenance: z
    .looseObject({
      by: plainText(120).optional(),
      at: plainText(40).optional(),
      parentRevision: plainText(80).optional(),
      contentHash: plainText(80).optional(),
    })
    .optional(),
});

export type ProfileDocument = z.infer<typeof profileDocumentSchema>;
export type ProfileMode = z.infer<typeof profileModeSchema>;
export type ProfileSlot = z.infer<typeof profileSlotSchema>;
export type Placement = z.infer<typeof placementSchema>;
export type Trim = z.infer<typeof trimSchema>;
export type ExpectedSource = z.infer<typeof sourceFormatSchema>;
export type LineFilter = z.infer<typeof lineFilterSchema>;
export type OutputKind = z.infer<typeof outputKindSchema>;
