import { z } from "zod";
import { rasterTimingSchema, screenEnvelopeSchema } from "@/lib/profile/document";
import { findingSchema } from "@/lib/contracts/finding";

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
