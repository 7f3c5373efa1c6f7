import { and, desc, eq, exists, isNull, or, sql } from "drizzle-orm";
import type { SQL } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { isMaintainer, type Maintaining } from "@/db/queries/askers";
import { pageFrom, readCursor } from "@/db/queries/paging";
import type { OwnedKey } from "@/db/queries/paging";
import { device } from "@/db/schema/device";
import { driverQuestion, recording } from "@/db/schema/recording";
import { user } from "@/db/schema/user";
import type { Page } from "@/lib/contracts/page";
import type { RecordingQuery, RecordingView } from "@/lib/contracts/recording";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

const columns = {
  id: recording.id,
  name: recording.name,
  owner: { id: user.id, name: user.name },
  driverSlug: recording.driverSlug,
  driverVersion: recording.driverVersion,
  deviceId: device.id,
  deviceName: device.name,
  startedAt: recording.startedAt,
  struckOut: recording.struckOut,
  exchanges: recording.exchanges,
  lines: recording.lines,
  bytes: sql<number>`octet_length(${recording.content})`,
  questions: sql<number>`(select count(*)::int from ${driverQuestion} q where q.recording_id = ${recording.id})`,
  createdAt: recording.createdAt,
  sortedBy: sql<string>`${recording.createdAt}::text`,
};

function selectRecordings(db: Db) {
  return db
    .select(columns)
    .from(recording)
    .innerJoin(user, eq(user.id, recording.ownerId))
    .leftJoin(
      device,
      and(eq(device.ownerId, recording.ownerId), eq(device.id, recording.deviceId), isNull(device.deletedAt)),
    );
}

type Row = Awaited<ReturnType<typeof selectRecordings>>[number];

function viewOf(row: Row, askerId: string): RecordingView {
  const { driverSlug, driverVersion, deviceId, deviceName, startedAt, createdAt, sortedBy: _sortedBy, ...shown } = row;
  const mine = row.owner.id === askerId;
  return {
    ...shown,
    mine,
    driver: { slug: driverSlug, version: driverVersion },
    // What an owner calls their devices is nobody else's affair.
    device: mine && deviceId !== null ? { id: deviceId, name: deviceName ?? "" } : null,
    startedAt: startedAt?.toISOString() ?? null,
    createdAt: createdAt.toISOString(),
  };
}

/** One's own recordings, and for maintainers those that are attached to a question. */
function visible(db: Db, asker: Maintaining): SQL | undefined {
  const own = eq(recording.ownerId, asker.id);
  const asked = exists(
    db.select({ id: driverQuestion.id }).from(driverQuestion).where(eq(driverQuestion.recordingId, recording.id)),
  );
  return and(isNull(recording.deletedAt), isMaintainer(asker) ? or(own, asked) : own);
}

/** Recordings that the asker may see, latest first. Error: "bad-cursor". */
export async function listRecordings(
  db: Db,
  asker: Maintaining,
  { slug, mine, cursor, limit }: RecordingQuery,
): Promise<Result<Page<RecordingView>, "bad-cursor">> {
  const from = readCursor(cursor, "time");
  if (!from.ok) return from;
  const own = mine === "true" || !isMaintainer(asker);
  const rows = await selectRecordings(db)
    .where(
      and(
        own ? and(isNull(recording.deletedAt), eq(recording.ownerId, asker.id)) : visible(db, asker),
        slug === undefined ? undefined : eq(recording.driverSlug, slug),
        from.value === null
          ? undefined
          : sql`(${recording.createdAt}, ${recording.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(recording.createdAt), desc(recording.id))
    .limit(limit + 1);
  return ok(
    pageFrom(
      rows,
      limit,
      (row) => ({ after: row.sortedBy, id: row.id }),
      (row) => viewOf(row, asker.id),
    ),
  );
}

/** Error: "absent" where there is none that the asker may see. */
export async function getRecording(db: Db, asker: Maintaining, id: string): Promise<Result<RecordingView, "absent">> {
  const [row] = await selectRecordings(db).where(and(eq(recording.id, id), visible(db, asker)));
  return row === undefined ? fail("absent") : ok(viewOf(row, asker.id));
}

/** The file itself. Error: "absent". */
export async function readRecording(
  db: Db,
  asker: Maintaining,
  id: string,
): Promise<Result<{ readonly name: string; readonly content: string }, "absent">> {
  const [row] = await db
    .select({ name: recording.name, content: recording.content })
    .from(recording)
    .where(and(eq(recording.id, id), visible(db, asker)));
  return row === undefined ? fail("absent") : ok(row);
}

/** The latest recordings of a driver that its maintainers may see, with their content: what conformance is tried on. */
export async function recordingsForDriver(
  db: Db,
  asker: Maintaining,
  slug: string,
  most: number,
): Promise<readonly { readonly name: string; readonly content: string }[]> {
  return db
    .select({ name: recording.name, content: recording.content })
    .from(recording)
    .where(and(eq(recording.driverSlug, slug), visible(db, asker)))
    .orderBy(desc(recording.createdAt), desc(recording.id))
    .limit(most);
}

export type RecordingValues = {
  /** Chosen by the demo alone. */
  readonly id?: string | undefined;
  readonly name: string;
  readonly deviceId?: string | undefined;
  readonly driver: { readonly slug: string; readonly version: string };
  readonly startedAt: Date | null;
  readonly struckOut: boolean;
  readonly exchanges: number;
  readonly lines: number;
  readonly content: string;
};

/** Recordings of one owner that are kept: what they hold together has a bound. */
export const MAX_RECORDINGS = 200;

/** Stores a recording. Errors: "no-device" when it names one that is not the owner's; "too-many". */
export async function createRecording(
  db: Db,
  ownerId: string,
  { driver, ...values }: RecordingValues,
): Promise<Result<RecordingView, "no-device" | "too-many">> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ count: sql<number>`count(*)::int` })
      .from(recording)
      .where(and(eq(recording.ownerId, ownerId), isNull(recording.deletedAt)));
    if ((held?.count ?? 0) >= MAX_RECORDINGS) return fail("too-many");
    if (values.deviceId !== undefined) {
      const found = await tx
        .select({ id: device.id })
        .from(device)
        .where(and(eq(device.ownerId, ownerId), eq(device.id, values.deviceId), isNull(device.deletedAt)));
      if (found.length === 0) return fail("no-device");
    }
    const [made] = await tx
      .insert(recording)
      .values({ ...values, ownerId, driverSlug: driver.slug, driverVersion: driver.version })
      .returning({ id: recording.id });
    if (made === undefined) throw new Error("an insert gave no row");
    await writeAudit(tx, {
      actorId: ownerId,
      action: "recording.create",
      subject: made.id,
      detail: { exchanges: values.exchanges, struckOut: values.struckOut },
    });
    return getRecording(tx, { id: ownerId, role: "owner" }, made.id) as Promise<Result<RecordingView, never>>;
  });
}

/** Takes a recording out of every list; its owner alone can. Error: "absent". */
export async function deleteRecording(db: Db, { ownerId, id }: OwnedKey): Promise<Result<null, "absent">> {
  return db.transaction(async (tx) => {
    const gone = await tx
      .update(recording)
      .set({ deletedAt: sql`now()` })
      .where(and(eq(recording.id, id), eq(recording.ownerId, ownerId), isNull(recording.deletedAt)))
      .returning({ id: recording.id });
    if (gone.length === 0) return fail("absent");
    await writeAudit(tx, { actorId: ownerId, action: "recording.delete", subject: id });
    return ok(null);
  });
}
