import { and, eq, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import type { OwnedKey } from "@/db/queries/paging";
import { searchedColumns } from "@/db/queries/profile-outline";
import { getProfile } from "@/db/queries/revisions";
import { profile, revision } from "@/db/schema/profile";
import type { ProfileDetail } from "@/lib/contracts/profile";
import { hashDocument } from "@/lib/profile/canonical";
import type { ProfileDocument } from "@/lib/profile/document";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** Whoever writes a revision, as its provenance names them. */
export type Author = { readonly id: string; readonly name: string };

export type NewDocument = { readonly document: ProfileDocument; readonly note?: string | undefined; readonly at: Date };

/** The document with who, when and from what put into it by the server: nobody else is believed. */
function withProvenance(document: ProfileDocument, author: Author, at: Date, parentId: string | null): ProfileDocument {
  const parent = parentId === null ? {} : { parentRevision: parentId };
  return {
    ...document,
    provenance: { by: author.name, at: at.toISOString(), ...parent, contentHash: hashDocument(document) },
  };
}

type RevisionValues = NewDocument & {
  readonly author: Author;
  readonly profileId: string;
  readonly number: number;
  readonly parentId: string | null;
};

async function insertRevision(tx: Db, values: RevisionValues): Promise<string> {
  const { author, profileId, number, parentId, document, note, at } = values;
  const [made] = await tx
    .insert(revision)
    .values({
      profileId,
      number,
      parentId,
      authorId: author.id,
      document: withProvenance(document, author, at, parentId),
      documentHash: hashDocument(document),
      note,
      createdAt: at,
    })
    .returning({ id: revision.id });
  if (made === undefined) throw new Error("an insert gave no row");
  return made.id;
}

/**
 * Makes a profile with its first revision. The document has a title.
 * An `id` is chosen by the demo alone.
 */
export async function createProfile(
  db: Db,
  author: Author,
  { visibility, id, ...made }: NewDocument & { readonly visibility: "private" | "shared"; readonly id?: string },
): Promise<ProfileDetail> {
  return db.transaction(async (tx) => {
    const [row] = await tx
      .insert(profile)
      .values({
        ...searchedColumns(made.document),
        id,
        ownerId: author.id,
        visibility,
        currentRevision: 1,
        createdAt: made.at,
        updatedAt: made.at,
      })
      .returning({ id: profile.id });
    if (row === undefined) throw new Error("an insert gave no row");
    await insertRevision(tx, { ...made, author, profileId: row.id, number: 1, parentId: null });
    await writeAudit(tx, { actorId: author.id, action: "profile.create", subject: row.id, detail: { visibility } });
    return madeProfile(tx, author.id, row.id);
  });
}

async function madeProfile(tx: Db, askerId: string, id: string): Promise<ProfileDetail> {
  const found = await getProfile(tx, { askerId, id });
  if (!found.ok) throw new Error("a profile that was just written is not there");
  return found.value;
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(profile.ownerId, ownerId), eq(profile.id, id), isNull(profile.deletedAt));
}

/** Why an owner's act on a profile was not done: "absent" covers what may not be seen, "forbidden" another's shared one. */
export type ProfileRefusal = "absent" | "forbidden";

async function refusalOf(tx: Db, { ownerId, id }: OwnedKey): Promise<ProfileRefusal | null> {
  const seen = await getProfile(tx, { askerId: ownerId, id });
  if (!seen.ok) return "absent";
  return seen.value.mine ? null : "forbidden";
}

/** Adds a revision after revision `after`. Error "stale": another one came first. */
export async function addRevision(
  db: Db,
  author: Author,
  key: { readonly id: string; readonly after: number },
  added: NewDocument,
): Promise<Result<ProfileDetail, ProfileRefusal | "stale">> {
  return db.transaction(async (tx) => {
    const refusal = await refusalOf(tx, { ownerId: author.id, id: key.id });
    if (refusal !== null) return fail(refusal);
    // Of two at once the second waits here for the first, then finds the number moved on.
    const moved = await tx
      .update(profile)
      .set({ ...searchedColumns(added.document), currentRevision: key.after + 1, updatedAt: added.at })
      .where(and(owned({ ownerId: author.id, id: key.id }), eq(profile.currentRevision, key.after)))
      .returning({ id: profile.id });
    if (moved.length === 0) return fail("stale");
    const [parent] = await tx
      .select({ id: revision.id })
      .from(revision)
      .where(and(eq(revision.profileId, key.id), eq(revision.number, key.after)));
    const number = key.after + 1;
    await insertRevision(tx, { ...added, author, profileId: key.id, number, parentId: parent?.id ?? null });
    await writeAudit(tx, { actorId: author.id, action: "profile.revise", subject: key.id, detail: { number } });
    return ok(await madeProfile(tx, author.id, key.id));
  });
}

/** Shares a profile, or takes it back. */
export async function setVisibility(
  db: Db,
  key: OwnedKey,
  visibility: "private" | "shared",
): Promise<Result<ProfileDetail, ProfileRefusal>> {
  return db.transaction(async (tx) => {
    const refusal = await refusalOf(tx, key);
    if (refusal !== null) return fail(refusal);
    await tx
      .update(profile)
      .set({ visibility, updatedAt: sql`now()` })
      .where(owned(key));
    await writeAudit(tx, {
      actorId: key.ownerId,
      action: "profile.visibility",
      subject: key.id,
      detail: { visibility },
    });
    return ok(await madeProfile(tx, key.ownerId, key.id));
  });
}

/** Takes a profile out of every list. Plans that rest on one of its revisions keep it. */
export async function deleteProfile(db: Db, key: OwnedKey): Promise<Result<null, ProfileRefusal>> {
  return db.transaction(async (tx) => {
    const refusal = await refusalOf(tx, key);
    if (refusal !== null) return fail(refusal);
    await tx
      .update(profile)
      .set({ deletedAt: sql`now()` })
      .where(owned(key));
    await writeAudit(tx, { actorId: key.ownerId, action: "profile.delete", subject: key.id });
    return ok(null);
  });
}
