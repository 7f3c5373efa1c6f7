import { z } from "zod";
import { idSchema, lineText, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";

export const driverSlug = z
  .string()
  .max(64)
  .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/u);
export const driverVersionNumber = z.string().regex(/^\d{1,4}\.\d{1,4}\.\d{1,4}$/u);

export const driverVersionStates = ["draft", "conformance", "published", "withdrawn"] as const;

export const slugParams = z.object({ slug: driverSlug });
export const versionParams = z.object({ slug: driverSlug, version: driverVersionNumber });

/** What every definition has to state before it can be kept, however unfinished it is. */
export const definitionHead = z.looseObject({
  slug: driverSlug,
  version: driverVersionNumber,
  // Not trimmed: what is kept, and its hash, is what was sent.
  maker: z.string().min(1).max(80),
  model: z.string().min(1).max(80),
});

const note = z.string().trim().max(2000);

/** The definition is any JSON: a draft may be unfinished. `errors` of the answer say what is still wrong, by path. */
export const newDriverVersion = z.object({ definition: definitionHead, note: note.default("") });
export type NewDriverVersion = z.input<typeof newDriverVersion>;
export const draftChange = z.object({ definition: definitionHead, note: note.optional() });
export type DraftChange = z.input<typeof draftChange>;
export const withdrawal = z.object({ reason: lineText(500) });
export type Withdrawal = z.input<typeof withdrawal>;

export const driverVersionView = z.object({
  id: idSchema,
  slug: z.string(),
  version: z.string(),
  state: z.enum(driverVersionStates),
  /** `shipped`: came with the program. */
  origin: z.enum(["shipped", "written"]),
  note: z.string(),
  /** SHA-256 over the canonical JSON (RFC 8785) of the definition: a report speaks of this very one. */
  hash: z.string(),
  author: z.object({ id: idSchema, name: z.string() }).nullable(),
  /** The latest report of this very definition. */
  report: z.object({ id: idSchema, green: z.boolean(), createdAt: timeSchema }).nullable(),
  /** Counts changes; the ETag. */
  revision: z.number().int(),
  createdAt: timeSchema,
  updatedAt: timeSchema,
  publishedAt: timeSchema.nullable(),
  withdrawnAt: timeSchema.nullable(),
  withdrawnReason: z.string().nullable(),
});
export type DriverVersionView = z.infer<typeof driverVersionView>;
export const driverVersionPage = pageOf(driverVersionView);

export const pathMessage = z.object({ path: z.string(), message: z.string() });

export const driverVersionDetail = driverVersionView.extend({
  definition: z.record(z.string(), z.unknown()),
  /** What is wrong with it, by path; empty when it compiles. */
  problems: z.array(pathMessage),
});
export type DriverVersionDetail = z.infer<typeof driverVersionDetail>;

export const driverSummary = z.object({
  slug: z.string(),
  maker: z.string(),
  model: z.string(),
  /** Highest published version. Null: all were withdrawn, or none was published. */
  latest: z
    .object({
      version: z.string(),
      publishedAt: timeSchema,
      protocol: z.string(),
      firmware: z.object({ min: z.string(), max: z.string() }),
      /** The latest report of it. */
      report: z.object({ green: z.boolean(), createdAt: timeSchema }).nullable(),
    })
    .nullable(),
  versions: z.number().int(),
  /** Drafts and candidates; maintainers alone see more than 0. */
  unpublished: z.number().int(),
  /** Questions without an answer; maintainers alone see more than 0. */
  openQuestions: z.number().int(),
});
export type DriverSummary = z.infer<typeof driverSummary>;
export const driverPage = pageOf(driverSummary);
export const driverQuery = pageQuery;
export type DriverQuery = z.infer<typeof driverQuery>;

/** A device whose driver version is not the latest, or was withdrawn. */
export const driverNotice = z.object({
  kind: z.enum(["new-version", "withdrawn"]),
  device: z.object({ id: idSchema, name: z.string() }),
  slug: z.string(),
  from: z.string(),
  /** Null: there is no published version to move to. */
  to: z.string().nullable(),
  /** What the maintainers say of it: the new version's note, or why the old one was withdrawn. */
  note: z.string(),
});
export type DriverNotice = z.infer<typeof driverNotice>;
export const driverNoticeList = z.object({ items: z.array(driverNotice) });

export const driverMove = z.object({ version: driverVersionNumber });
export type DriverMove = z.input<typeof driverMove>;
export const moveQuery = z.object({ to: driverVersionNumber });

/** One place where two definitions differ; null stands for "not there". */
export const definitionChange = z.object({ path: z.string(), left: z.unknown(), right: z.unknown() });

export const comparisonQuery = z.object({ with: driverVersionNumber });
export const versionComparison = z.object({
  left: z.string(),
  right: z.string(),
  changes: z.array(definitionChange),
  /** There are more changes than are listed. */
  more: z.boolean(),
});
export type VersionComparison = z.infer<typeof versionComparison>;

/** What another version would make of the device's last backup. */
export const driverMovePreview = z.object({
  from: z.string(),
  to: z.string(),
  backupId: idSchema.nullable(),
  changes: z.array(definitionChange),
  /** There are more changes than are listed. */
  more: z.boolean(),
  /** Settings that the new version reads or means differently. */
  settings: z.array(
    z.object({
      key: z.string(),
      label: z.string(),
      kind: z.enum(["added", "removed", "meaning", "range", "wire"]),
      left: z.unknown(),
      right: z.unknown(),
    }),
  ),
});
export type DriverMovePreview = z.infer<typeof driverMovePreview>;
