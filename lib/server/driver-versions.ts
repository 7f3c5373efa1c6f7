import "server-only";
import type { Db } from "@/db/client";
import type { Maintaining } from "@/db/queries/askers";
import { createDraft } from "@/db/queries/driver-acts";
import { findVersion, readDefinition, type StoredDefinition, type VersionKey } from "@/db/queries/drivers";
import type { Asker } from "@/db/queries/askers";
import { definitionHead, type DriverVersionDetail, type DriverVersionView } from "@/lib/contracts/driver";
import { MAX_PROBLEMS, schemaProblems } from "@/lib/profile/parse-problems";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";
import { parseDefinition, readDefinitionText, storageProblems } from "@/lib/serial/driver/parse-definition";

/** What is wrong with a definition, by path; empty where it compiles. */
export function problemsOf(definition: StoredDefinition): PathMessage[] {
  const parsed = parseDefinition(definition);
  return parsed.ok ? [] : parsed.error.slice(0, MAX_PROBLEMS);
}

/** A version with what it says and what is wrong with it. Error: "absent" where the asker may not see it. */
export async function versionDetail(
  db: Db,
  asker: Asker,
  key: VersionKey,
): Promise<Result<DriverVersionDetail, "absent">> {
  const view = await findVersion(db, asker, key);
  if (!view.ok) return view;
  const stored = await readDefinition(db, asker, key);
  return stored.ok
    ? ok({ ...view.value, definition: stored.value.definition, problems: problemsOf(stored.value.definition) })
    : stored;
}

/** A written version with its text, as an act answers. */
export function detailOf(view: DriverVersionView, definition: StoredDefinition): DriverVersionDetail {
  return { ...view, definition, problems: problemsOf(definition) };
}

type Refused = { readonly code: "not-a-definition"; readonly errors: readonly PathMessage[] };

const refused = (errors: readonly PathMessage[]): { ok: false; error: Refused } =>
  fail({ code: "not-a-definition", errors });

/** A definition as it was written, and what it says that it is. */
export type Storable = VersionKey & {
  readonly maker: string;
  readonly model: string;
  readonly definition: StoredDefinition;
};

/**
 * A definition that can be kept: it may be unfinished, and it names itself.
 * @param wanted what the address says that it is
 */
export function storableDefinition(definition: unknown, wanted: Partial<VersionKey>): Result<Storable, Refused> {
  const unstorable = storageProblems(definition);
  if (unstorable.length > 0) return refused(unstorable);
  const head = definitionHead.safeParse(definition);
  if (!head.success) return refused(schemaProblems(head.error));
  const { slug, version, maker, model } = head.data;
  for (const [path, said, asked] of [
    ["slug", slug, wanted.slug],
    ["version", version, wanted.version],
  ] as const) {
    if (asked !== undefined && said !== asked) return refused([{ path, message: `Must be ${asked}, as the address says.` }]);
  }
  // The cast holds: it was seen to be a group of fields.
  return ok({ slug, version, maker, model, definition: definition as StoredDefinition });
}

/** Begins a version from a definition. Errors: "not-a-definition" with paths; "known". */
export async function draftFrom(
  db: Db,
  by: Maintaining,
  given: unknown,
  wanted: Partial<VersionKey>,
  note: string,
): Promise<Result<DriverVersionDetail, Refused | "known">> {
  const storable = storableDefinition(given, wanted);
  if (!storable.ok) return storable;
  const made = await createDraft(db, by, { ...storable.value, note });
  return made.ok ? ok(detailOf(made.value, storable.value.definition)) : made;
}

/** Begins a version from a file. Errors as of `draftFrom`. */
export async function draftFromFile(
  db: Db,
  by: Maintaining,
  bytes: Uint8Array,
): Promise<Result<DriverVersionDetail, Refused | "known">> {
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return refused([{ path: "", message: "The file is not UTF-8." }]);
  }
  const read = readDefinitionText(text);
  return read.ok ? draftFrom(db, by, read.value, {}, "Imported from a file") : refused(read.error);
}
