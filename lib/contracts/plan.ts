import { z } from "zod";
import { profileDocumentSchema } from "@/lib/profile/document";
import { documentPatchSchema } from "@/lib/contracts/finding";
import { idSchema, timeSchema } from "@/lib/contracts/page";

const hash = z.string().regex(/^[0-9a-f]{64}$/u, "is not a SHA-256 in hex");

const nativeWrite = z.object({ key: z.string().max(160), value: z.union([z.number().int(), z.string().max(128)]) });

export const planTarget = z.discriminatedUnion("kind", [
  /** A published revision, with the remedies that were taken, in their order. */
  z.object({
    kind: z.literal("revision"),
    revisionId: idSchema,
    patches: z.array(documentPatchSchema).max(2000).default([]),
  }),
  /** A backup of this device or of another of the same driver. */
  z.object({ kind: z.literal("restore"), backupId: idSchema }),
  /** A document that was not published. */
  z.object({ kind: z.literal("document"), document: profileDocumentSchema }),
  /** Settings changed by hand, by the backup's own slots and modes; `native` for those that no document has a word for. */
  z.object({
    kind: z.literal("edits"),
    edits: z.array(documentPatchSchema).max(2000),
    native: z.array(nativeWrite).max(2000).default([]),
  }),
]);

/**
 * What was reviewed. Active slot, arriving source and raster come from the stored backup; the server checks and plans
 * again and gives an id only where its hash is the same.
 */
export const newPlan = z.object({
  backupId: idSchema,
  target: planTarget,
  leftOut: z.array(z.number().int()).max(256),
  screen: z.union([z.object({ id: idSchema }), z.literal("accepted-unknown")]),
  /** `rule` + " " + `path` of each acknowledged caution, in the order of the plan's own input. */
  acknowledged: z.array(z.string().max(300)).max(2000),
  hash,
});
export type NewPlan = z.input<typeof newPlan>;

/** The ETag is the hash. */
export const planView = z.object({
  id: idSchema,
  deviceId: idSchema,
  backupId: idSchema,
  hash,
  way: z.number().int(),
  writes: z.array(nativeWrite),
  recalls: z.array(z.number().int()),
  changedSlots: z.array(z.number().int()),
  bytes: z.number(),
  seconds: z.number(),
  createdAt: timeSchema,
});
export type PlanView = z.infer<typeof planView>;

/** Everything that is needed to take up a run again in another browser: the input of `planChanges`, whole. */
export const planDetail = planView.extend({ input: z.unknown() });
