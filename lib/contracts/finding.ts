import { z } from "zod";

export const severitySchema = z.enum(["stop", "caution", "note"]);

/** One value set at a document path; the shape of `DocumentPatch`. */
export const documentPatchSchema = z.object({
  path: z.string().max(200),
  value: z.union([z.string().max(500), z.number(), z.boolean(), z.null()]),
});

export const remedySchema = z.discriminatedUnion("kind", [
  z.object({ kind: z.literal("set"), label: z.string(), patch: z.array(documentPatchSchema) }),
  z.object({ kind: z.literal("leave-out"), label: z.string(), slot: z.number().int() }),
]);

/** What a check says; the shape of `Finding` in `lib/profile`. */
export const findingSchema = z.object({
  rule: z.string(),
  path: z.string(),
  severity: severitySchema,
  measured: z.union([z.number(), z.string()]).optional(),
  limit: z.union([z.number(), z.string(), z.tuple([z.number(), z.number()])]).optional(),
  unit: z.string().optional(),
  sentence: z.string(),
  detail: z.string().optional(),
  limitSource: z.string().optional(),
  slots: z.array(z.number().int()),
  remedies: z.array(remedySchema),
});
