import { z } from "zod";
import { screenEnvelopeSchema } from "@/lib/profile/document";

/** An EDID has 256 blocks of 128 bytes at most. Source: VESA E-EDID. */
export const EDID_BYTES = 32_768;

/** An EDID as a screen: what the form for a new screen is filled with. */
export const edidAnswer = z.object({
  screen: screenEnvelopeSchema,
  product: z.object({
    /** Three letters. */
    maker: z.string(),
    code: z.number().int(),
    name: z.string().optional(),
    serial: z.string().optional(),
    year: z.number().int().optional(),
  }),
  /** Where the limits come from, and what an EDID does not say. */
  notes: z.array(z.string()),
  /** What does not add up in it. */
  warnings: z.array(z.string()),
});
