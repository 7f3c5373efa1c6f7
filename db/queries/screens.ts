import { and, asc, eq, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { pageFrom, readCursor } from "@/db/queries/paging";
import type { OwnedKey } from "@/db/queries/paging";
import { device } from "@/db/schema/device";
import { screen } from "@/db/schema/screen";
import type { Page, PageQuery } from "@/lib/contracts/page";
import type { ScreenView } from "@/lib/contracts/screen";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

const columns = {
  id: screen.id,
  name: screen.name,
  envelope: screen.envelope,
  presetId: screen.presetId,
  notes: screen.notes,
  version: screen.version,
  updatedAt: screen.updatedAt,
  // A column in a query of one table is written without its table, and would name the inner one's.
  devices: sql<{ id: string; name: string }[]>`coalesce((
    select json_agg(json_build_object('id', d.id, 'name', d.name) order by d.name, d.id) from ${device} d
    where d.owner_id = ${screen}."owner_id" and d.screen_id = ${screen}."id" and d.deleted_at is null), '[]')`,
};

type Row = {
  id: string;
  name: string;
  envelope: ScreenEnvelope;
  presetId: string | null;
  notes: string;
  version: number;
  updatedAt: Date;
  devices: { id: string; name: string }[];
};

/** The stored envelope passed the contract's schema on its way in; only its lists are typed more loosely there. */
function viewOf(row: Row): ScreenView {
  return { ...row, envelope: row.envelope as ScreenView["envelope"], updatedAt: row.updatedAt.toISOString() };
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(screen.ownerId, ownerId), eq(screen.id, id), isNull(screen.deletedAt));
}

/** An owner's screens by name. Error: "bad-cursor". */
export async function listScreens(
  db: Db,
  ownerId: string,
  { cursor, limit }: PageQuery,
): Promise<Result<Page<ScreenView>, "bad-cursor">> {
  const from = readCursor(cursor, "text");
  if (!from.ok) return from;
  const after =
    from.value === null
      ? undefined
      : sql`(${screen.name}, ${screen.id}) > (${from.value.after}, ${from.value.id}::uuid)`;
  const rows = await db
    .select(columns)
    .from(screen)
    .where(and(eq(screen.ownerId, ownerId), isNull(screen.deletedAt), after))
    .orderBy(asc(screen.name), asc(screen.id))
    .limit(limit + 1);
  return ok(pageFrom(rows, limit, (row) => ({ after: row.name, id: row.id }), viewOf));
}

/** Error: "absent" when it is not the owner's, or was deleted. */
export async function getScreen(db: Db, key: OwnedKey): Promise<Result<ScreenView, "absent">> {
  const [row] = await db.select(columns).from(screen).where(owned(key));
  return row === undefined ? fail("absent") : ok(viewOf(row));
}

export type ScreenValues = {
  /** Chosen by the demo alone. */
  readonly id?: string | undefined;
  readonly envelope: ScreenEnvelope;
  readonly presetId?: string | undefined;
  readonly notes?: string | undefined;
};

/** Stores a new screen; its name is the envelope's. */
export async function createScreen(db: Db, ownerId: string, values: ScreenValues): Promise<ScreenView> {
  return db.transaction(async (tx) => {
    const { id, envelope, presetId, notes } = values;
    const [made] = await tx
      .insert(screen)
      .values({ id, ownerId, name: envelope.name, envelope, presetId, notes })
      .returning(columns);
    if (made === undefined) throw new Error("an insert gave no row");
    await writeAudit(tx, { actorId: ownerId, action: "screen.create", subject: made.id });
    return viewOf(made);
  });
}

/** Changes a screen that still has `version`. Errors: "absent"; "stale" when it moved on. */
export async function changeScreen(
  db: Db,
  key: OwnedKey & { readonly version: number },
  change: { readonly envelope?: ScreenEnvelope | undefined; readonly notes?: string | undefined },
): Promise<Result<ScreenView, "absent" | "stale">> {
  return db.transaction(async (tx) => {
    const [changed] = await tx
      .update(screen)
      .set({ ...change, name: change.envelope?.name, version: sql`${screen.version} + 1`, updatedAt: sql`now()` })
      .where(and(owned(key), eq(screen.version, key.version)))
      .returning(columns);
    if (changed === undefined) return fail((await getScreen(tx, key)).ok ? "stale" : "absent");
    await writeAudit(tx, { actorId: key.ownerId, action: "screen.change", subject: key.id });
    return ok(viewOf(changed));
  });
}

/** Deletes a screen; devices that stood before it have none then. Error: "absent". */
export async function deleteScreen(db: Db, key: OwnedKey): Promise<Result<null, "absent">> {
  return db.transaction(async (tx) => {
    const gone = await tx
      .update(screen)
      .set({ deletedAt: sql`now()` })
      .where(owned(key))
      .returning({ id: screen.id });
    if (gone.length === 0) return fail("absent");
    await tx
      .update(device)
      .set({ screenId: null, version: sql`${device.version} + 1` })
      .where(and(eq(device.ownerId, key.ownerId), eq(device.screenId, key.id)));
    await writeAudit(tx, { actorId: key.ownerId, action: "screen.delete", subject: key.id });
    return ok(null);
  });
}
