import { z } from "zod";
import { deviceLimitsSchema } from "@/lib/contracts/check";
import { findingSchema } from "@/lib/contracts/finding";
import { pageOf } from "@/lib/contracts/page";
import { rasterTimingSchema, screenEnvelopeSchema } from "@/lib/profile/document";

const parts = z.object({ active: z.number(), frontPorch: z.number(), sync: z.number(), backPorch: z.number() });

export const describeRequest = z.object({ timing: rasterTimingSchema, screen: screenEnvelopeSchema.optional() });
export type DescribeRequest = z.input<typeof describeRequest>;

export const describeAnswer = z.object({
  lineTotal: z.number(),
  fieldLines: z.number(),
  frameLines: z.number(),
  lineRateHz: z.number(),
  fieldRateHz: z.number(),
  horizontalUs: parts,
  /** Per field. */
  verticalLines: parts,
  findings: z.array(findingSchema),
});

const fitFigure = z.enum([
  "activeLines",
  "activePx",
  "fieldRateHz",
  "interlaced",
  "lineRateHz",
  "pixelClockHz",
  "lineTotal",
  "fieldLines",
]);

export const fitRequest = z.object({
  /** Lines of the frame: 480 for 480i. */
  activeLines: z.number(),
  activePx: z.number(),
  fieldRateHz: z.number(),
  interlaced: z.boolean(),
  /** Locks: what a raster has to have besides. */
  lineRateHz: z.number().optional(),
  pixelClockHz: z.number().optional(),
  lineTotal: z.number().optional(),
  /** Whole lines of a field. */
  fieldLines: z.number().optional(),
  screen: screenEnvelopeSchema,
  /** Limits, or the slug of a driver. */
  device: z.union([z.string().max(64), deviceLimitsSchema]).optional(),
  /** At most so many rasters in each list. */
  limit: z.number().int().min(1).max(64).optional(),
  /** What the nearest rasters should rather not change, when nothing fits. */
  keep: z.array(fitFigure).max(fitFigure.options.length).optional(),
});
export type FitRouteRequest = z.input<typeof fitRequest>;

const fitted = z.object({
  timing: rasterTimingSchema,
  lineRateHz: z.number(),
  fieldRateHz: z.number(),
  /** Field rate less the wished one. */
  rateErrorHz: z.number(),
  /** The catalogue's id, where the raster is a published one. */
  standard: z.string().optional(),
  notes: z.array(z.string()),
});

const figureValue = z.union([z.number(), z.boolean()]);

export const fitAnswer = z.object({
  /** Best first. */
  fits: z.array(fitted),
  /** Why nothing fits; with `nearest` empty where something does. */
  blockedBy: z.array(findingSchema),
  nearest: z.array(
    fitted.extend({
      changed: z.array(
        z.object({
          figure: fitFigure,
          from: figureValue,
          to: figureValue,
          unit: z.enum(["Hz", "lines", "px", "clocks", ""]),
          /** It was to be kept. */
          kept: z.boolean(),
        }),
      ),
    }),
  ),
});
export type FitRouteAnswer = z.infer<typeof fitAnswer>;

export const modelineRequest = z.union([
  z.object({ modeline: z.string() }),
  z.object({ timing: rasterTimingSchema, name: z.string().max(80).optional() }),
]);

/** The modeline as we write it: polarities always stated, the counts of a doublescan line doubled. */
export const modelineAnswer = z.object({
  name: z.string(),
  timing: rasterTimingSchema,
  modeline: z.string(),
  /** What was assumed or left out in reading. */
  notes: z.array(z.string()),
});

export const standardsQuery = z.object({
  /** Picture lines of a frame, or of a field of an interlaced raster. */
  lines: z.coerce.number().int().min(1).max(16_384).optional(),
  /** Field rate in Hz, within half a Hz. */
  rate: z.coerce.number().min(1).max(1000).optional(),
  /** Words that all occur in the name, the document, the code, the aspect or the note. */
  text: z.string().max(200).optional(),
});

/** One page holds the whole catalogue: it is of one size. */
export const standardsPage = pageOf(
  z.object({
    id: z.string(),
    name: z.string(),
    /** The standard that prints it, and its number there: a code of CTA-861, or a DMT identifier. */
    document: z.enum(["CTA-861", "VESA DMT", "ITU-R BT.601 and BT.470"]),
    code: z.number().int().optional(),
    aspect: z.string(),
    note: z.string().optional(),
    timing: rasterTimingSchema,
    lineRateHz: z.number(),
    fieldRateHz: z.number(),
  }),
);
