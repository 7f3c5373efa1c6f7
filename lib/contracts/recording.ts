import { z } from "zod";
import { driverSlug } from "@/lib/contracts/driver";
import { idSchema, lineText, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";

/** Longest recording that can be uploaded: the whole wire log of the bench takes about 3 MB. */
export const recordingBytes = 4 * 1024 * 1024;

const flag = z.enum(["true", "false"]).default("false");

/** The body is the file itself, JSON Lines. */
export const newRecordingQuery = z.object({
  name: lineText(120),
  /** Names and serial numbers are taken out before anything is stored. */
  strikeOut: flag,
  /** The owner's device that it was recorded from. */
  deviceId: idSchema.optional(),
});
export type NewRecordingQuery = z.input<typeof newRecordingQuery>;

/** A maintainer sees, beside their own, the recordings that are attached to a question. */
export const recordingQuery = pageQuery.extend({ slug: driverSlug.optional(), mine: flag });
export type RecordingQuery = z.infer<typeof recordingQuery>;

export const recordingView = z.object({
  id: idSchema,
  name: z.string(),
  owner: z.object({ id: idSchema, name: z.string() }),
  mine: z.boolean(),
  driver: z.object({ slug: z.string(), version: z.string() }),
  device: z.object({ id: idSchema, name: z.string() }).nullable(),
  startedAt: timeSchema.nullable(),
  struckOut: z.boolean(),
  exchanges: z.number().int(),
  lines: z.number().int(),
  bytes: z.number().int(),
  /** Questions that it is attached to: the maintainers see it because of them. */
  questions: z.number().int(),
  createdAt: timeSchema,
});
export type RecordingView = z.infer<typeof recordingView>;
export const recordingPage = pageOf(recordingView);

export const newQuestion = z.object({ text: z.string().trim().min(1).max(4000), recordingId: idSchema.optional() });
export type NewQuestion = z.input<typeof newQuestion>;
export const questionAnswer = z.object({ text: z.string().trim().min(1).max(4000) });
export type QuestionAnswer = z.input<typeof questionAnswer>;

export const questionView = z.object({
  id: idSchema,
  slug: z.string(),
  asker: z.object({ id: idSchema, name: z.string() }),
  mine: z.boolean(),
  text: z.string(),
  recording: z.object({ id: idSchema, name: z.string() }).nullable(),
  answer: z.object({ text: z.string(), by: z.string().nullable(), at: timeSchema }).nullable(),
  createdAt: timeSchema,
});
export type QuestionView = z.infer<typeof questionView>;
export const questionPage = pageOf(questionView);
