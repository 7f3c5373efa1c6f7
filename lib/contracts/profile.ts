import { z } from "zod";
import { profileDocumentSchema, rasterTimingSchema } from "@/lib/profile/document";
import { idSchema, lineText, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";

export const visibilitySchema = z.enum(["private", "shared"]);

/** What lists show of a profile's current revision. */
export const profileOutline = z.object({
  modes: z.array(z.object({ key: z.string(), name: z.string().optional(), timing: rasterTimingSchema.optional() })),
  modeCount: z.number().int(),
  slotCount: z.number().int(),
});
export type ProfileOutline = z.infer<typeof profileOutline>;

/** How many of the outline's modes with a timing the asked screen takes. */
const fit = z.object({ modes: z.number().int(), fitting: z.number().int() });

export const profileSummary = z.object({
  id: idSchema,
  title: z.string(),
  summary: z.string(),
  owner: z.object({ id: idSchema, name: z.string() }),
  mine: z.boolean(),
  visibility: visibilitySchema,
  currentRevision: z.number().int(),
  outline: profileOutline,
  lineRateHz: z.tuple([z.number(), z.number()]).nullable(),
  driverSlug: z.string().nullable(),
  /** Null unless a screen was asked for. */
  fit: fit.nullable(),
  updatedAt: timeSchema,
});
export type ProfileSummary = z.infer<typeof profileSummary>;
export const profilePage = pageOf(profileSummary);

export const profileQuery = pageQuery.extend({
  /** Beginnings of words in title and summary, all of them. */
  q: z.string().trim().max(100).optional(),
  mine: z.enum(["true", "false"]).default("false"),
  /** One of the asker's screens: adds `fit`. */
  screenId: idSchema.optional(),
  /** With `screenId`: only those whose line rates all lie within the screen's bands. */
  fitting: z.enum(["true", "false"]).default("false"),
  driverSlug: z.string().max(64).optional(),
});
export type ProfileQuery = z.infer<typeof profileQuery>;

export const revisionView = z.object({
  id: idSchema,
  number: z.number().int(),
  author: z.object({ id: idSchema, name: z.string() }).nullable(),
  documentHash: z.string(),
  note: z.string(),
  createdAt: timeSchema,
});
export type RevisionView = z.infer<typeof revisionView>;
export const revisionPage = pageOf(revisionView);

export const revisionDetail = revisionView.extend({ profileId: idSchema, document: profileDocumentSchema });
export type RevisionDetail = z.infer<typeof revisionDetail>;

/** The current revision's number is the ETag. */
export const profileDetail = profileSummary
  .omit({ fit: true })
  .extend({ revision: revisionDetail, createdAt: timeSchema });
export type ProfileDetail = z.infer<typeof profileDetail>;

const note = z.string().trim().max(1000);
const titled = profileDocumentSchema.refine((document) => (document.title ?? "").trim() !== "", {
  path: ["title"],
  message: "A profile needs a title.",
});

/** A document as it stands, or one made from some slots of a backup. */
export const newProfile = z.union([
  z.object({ document: titled, visibility: visibilitySchema, note: note.optional() }),
  z.object({
    fromBackup: idSchema,
    /** Slots to publish, with the modes that they use. */
    slots: z.array(z.number().int()).min(1).max(256),
    title: lineText(120),
    summary: z.string().trim().max(500).default(""),
    notes: z.string().trim().max(20_000).default(""),
    visibility: visibilitySchema,
    note: note.optional(),
  }),
]);
export type NewProfile = z.input<typeof newProfile>;

export const profileChange = z.object({ visibility: visibilitySchema });
export type ProfileChange = z.input<typeof profileChange>;

/** Needs `If-Match` with the number of the revision that it follows. */
export const newRevision = z.object({ document: titled, note: note.optional() });
export type NewRevision = z.input<typeof newRevision>;

export const revisionParams = z.object({ id: idSchema, number: z.coerce.number().int().min(1).max(1_000_000) });

/** A file's text is the body. */
export const importAnswer = z.object({
  profile: profileDetail,
  /** Fields that this version does not know; they were kept. */
  unknownFields: z.array(z.object({ path: z.string(), message: z.string() })),
});
export type ImportAnswer = z.infer<typeof importAnswer>;

export const exportQuery = z.object({ revision: z.coerce.number().int().min(1).optional() });
