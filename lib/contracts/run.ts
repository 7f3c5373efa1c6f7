import { z } from "zod";
import { idSchema, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";

export const runStateSchema = z.enum([
  "ready",
  "writing",
  "trying",
  "keeping",
  "kept",
  "called-off",
  "putting-back",
  "put-back",
  "unconfirmed",
  "mixed",
  "left",
]);

/** An id that a browser tab makes for itself. */
const holder = z.string().regex(/^[\w-]{8,64}$/u, "is 8 to 64 letters, digits, hyphens");

/** Needs `If-Match` with the plan's hash. One run a device is open at a time. */
export const newRun = z.object({
  planId: idSchema,
  countdownSeconds: z.number().int().min(10).max(120).default(30),
  holder,
});
export type NewRun = z.input<typeof newRun>;

export const runView = z.object({
  id: idSchema,
  deviceId: idSchema,
  planId: idSchema,
  state: runStateSchema,
  countdownSeconds: z.number().int(),
  /** The tab that runs it, and when it was last heard. */
  holder: z.string(),
  holderSeenAt: timeSchema,
  lastWord: z.enum(["keep", "back"]).nullable(),
  afterBackupId: idSchema.nullable(),
  /** Highest step number stored; -1 when there is none. */
  lastStep: z.number().int(),
  createdAt: timeSchema,
  updatedAt: timeSchema,
  endedAt: timeSchema.nullable(),
});
export type RunView = z.infer<typeof runView>;
export const runPage = pageOf(runView);

export const runQuery = pageQuery.extend({
  deviceId: idSchema.optional(),
  open: z.enum(["true", "false"]).default("false"),
});
export type RunQuery = z.infer<typeof runQuery>;

const nativeWrites = z
  .array(z.object({ key: z.string().max(160), value: z.union([z.number(), z.string().max(128)]) }))
  .max(1024);
const step = { number: z.number().int().min(0).max(1_000_000), atMs: z.number().min(0) };

/** One line of the journal; the shape of `JournalEntry` in `lib/serial`. */
export const journalEntrySchema = z.discriminatedUnion("kind", [
  z.object({
    ...step,
    kind: z.literal("request"),
    direction: z.enum(["forward", "back"]),
    request: z.enum(["write", "recall", "commit", "arm", "extend", "confirm", "disarm", "mute"]),
    slot: z.number().int().optional(),
    muteOn: z.boolean().optional(),
    old: nativeWrites.optional(),
    new: nativeWrites.optional(),
    outcome: z.enum(["leaving", "done", "refused", "unknown", "mismatch"]),
    readBack: nativeWrites.optional(),
  }),
  z.object({ ...step, kind: z.literal("state"), state: runStateSchema, why: z.string().max(500).optional() }),
  z.object({ ...step, kind: z.literal("word"), word: z.enum(["keep", "back"]) }),
  z.object({ ...step, kind: z.literal("boot-count"), bootCount: z.number().int() }),
  z.object({ ...step, kind: z.literal("stated-cycle") }),
  /** Live alignment: what counts as new from here on, over what did before. */
  z.object({ ...step, kind: z.literal("align"), values: nativeWrites }),
]);

/** Appending is idempotent by step number: a later outcome of a step takes the place of an earlier one. */
export const newSteps = z.object({ holder, entries: z.array(journalEntrySchema).min(1).max(200) });
export type NewSteps = z.input<typeof newSteps>;

export const stepsQuery = z.object({
  after: z.coerce.number().int().min(-1).default(-1),
  limit: z.coerce.number().int().min(1).max(1000).default(500),
});
export const stepList = z.object({ items: z.array(journalEntrySchema), more: z.boolean() });

/** Takes a run over from a tab that is closed, or by the owner's word from one that is not. */
export const holderChange = z.object({ holder, force: z.boolean().default(false) });
export type HolderChange = z.input<typeof holderChange>;

/** Names the backup that was taken after a run was kept. */
export const runClosing = z.object({ afterBackupId: idSchema });
