import { z } from "zod";
import { screenEnvelopeSchema } from "@/lib/profile/document";
import { idSchema, pageOf, timeSchema } from "@/lib/contracts/page";

const notes = z.string().max(2000);

/** The name is the envelope's. */
export const newScreen = z.object({
  envelope: screenEnvelopeSchema,
  presetId: z.string().max(40).optional(),
  notes: notes.optional(),
});
export type NewScreen = z.input<typeof newScreen>;

/** Needs `If-Match` with the version. What is missing stays. */
export const screenChange = z.object({ envelope: screenEnvelopeSchema.optional(), notes: notes.optional() });
export type ScreenChange = z.input<typeof screenChange>;

export const screenView = z.object({
  id: idSchema,
  name: z.string(),
  envelope: screenEnvelopeSchema,
  presetId: z.string().nullable(),
  notes: z.string(),
  /** Devices that stand before it. */
  devices: z.array(z.object({ id: idSchema, name: z.string() })),
  version: z.number().int(),
  updatedAt: timeSchema,
});
export type ScreenView = z.infer<typeof screenView>;
export const screenPage = pageOf(screenView);
