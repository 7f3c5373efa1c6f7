import { and, desc, eq, isNull, sql } from "drizzle-orm";
import { alias } from "drizzle-orm/pg-core";
import type { Db } from "@/db/client";
import { isMaintainer, type Maintaining } from "@/db/queries/askers";
import { writeAudit } from "@/db/queries/audit";
import { pageFrom, readCursor } from "@/db/queries/paging";
import { driver } from "@/db/schema/driver";
import { driverQuestion, recording } from "@/db/schema/recording";
import { user } from "@/db/schema/user";
import type { Page, PageQuery } from "@/lib/contracts/page";
import type { QuestionView } from "@/lib/contracts/recording";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

const answerer = alias(user, "answerer");

const columns = {
  id: driverQuestion.id,
  slug: driverQuestion.driverSlug,
  asker: { id: user.id, name: user.name },
  text: driverQuestion.text,
  recordingId: recording.id,
  recordingName: recording.name,
  answer: driverQuestion.answer,
  answeredBy: answerer.name,
  answeredAt: driverQuestion.answeredAt,
  createdAt: driverQuestion.createdAt,
  sortedBy: sql<string>`${driverQuestion.createdAt}::text`,
};

function selectQuestions(db: Db) {
  return db
    .select(columns)
    .from(driverQuestion)
    .innerJoin(user, eq(user.id, driverQuestion.askerId))
    .leftJoin(recording, and(eq(recording.id, driverQuestion.recordingId), isNull(recording.deletedAt)))
    .leftJoin(answerer, eq(answerer.id, driverQuestion.answeredById));
}

type Row = Awaited<ReturnType<typeof selectQuestions>>[number];

function viewOf(row: Row, askerId: string): QuestionView {
  const { recordingId, recordingName, answer, answeredBy, answeredAt, createdAt, sortedBy: _sortedBy, ...shown } = row;
  return {
    ...shown,
    mine: row.asker.id === askerId,
    recording: recordingId === null ? null : { id: recordingId, name: recordingName ?? "" },
    answer:
      answer === null || answeredAt === null ? null : { text: answer, by: answeredBy, at: answeredAt.toISOString() },
    createdAt: createdAt.toISOString(),
  };
}

/** One's own questions, for maintainers everybody's. */
const visible = (asker: Maintaining) => (isMaintainer(asker) ? undefined : eq(driverQuestion.askerId, asker.id));

/** Questions about a driver that the asker may see, latest first. Error: "bad-cursor". */
export async function listQuestions(
  db: Db,
  asker: Maintaining,
  slug: string,
  { cursor, limit }: PageQuery,
): Promise<Result<Page<QuestionView>, "bad-cursor">> {
  const from = readCursor(cursor, "time");
  if (!from.ok) return from;
  const rows = await selectQuestions(db)
    .where(
      and(
        eq(driverQuestion.driverSlug, slug),
        visible(asker),
        from.value === null
          ? undefined
          : sql`(${driverQuestion.createdAt}, ${driverQuestion.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(driverQuestion.createdAt), desc(driverQuestion.id))
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

async function findQuestion(db: Db, asker: Maintaining, id: string): Promise<QuestionView> {
  const [row] = await selectQuestions(db).where(and(eq(driverQuestion.id, id), visible(asker)));
  if (row === undefined) throw new Error("a question that was written is not there");
  return viewOf(row, asker.id);
}

export type QuestionValues = {
  /** Chosen by the demo alone. */
  readonly id?: string | undefined;
  readonly slug: string;
  readonly text: string;
  readonly recordingId?: string | undefined;
};

/** Asks the maintainers; they may see an attached recording from then on. Errors: "absent" driver; "no-recording" that is the asker's. */
export async function askQuestion(
  db: Db,
  asker: Maintaining,
  { slug, ...values }: QuestionValues,
): Promise<Result<QuestionView, "absent" | "no-recording">> {
  return db.transaction(async (tx) => {
    const known = await tx.select({ slug: driver.slug }).from(driver).where(eq(driver.slug, slug));
    if (known.length === 0) return fail("absent");
    if (values.recordingId !== undefined) {
      const own = await tx
        .select({ id: recording.id })
        .from(recording)
        .where(and(eq(recording.id, values.recordingId), eq(recording.ownerId, asker.id), isNull(recording.deletedAt)));
      if (own.length === 0) return fail("no-recording");
    }
    const [made] = await tx
      .insert(driverQuestion)
      .values({ ...values, driverSlug: slug, askerId: asker.id })
      .returning({ id: driverQuestion.id });
    if (made === undefined) throw new Error("an insert gave no row");
    await writeAudit(tx, { actorId: asker.id, action: "driver-question.ask", subject: made.id, detail: { slug } });
    return ok(await findQuestion(tx, asker, made.id));
  });
}

/** Answers a question, or answers it anew. Error: "absent". */
export async function answerQuestion(
  db: Db,
  by: Maintaining,
  id: string,
  text: string,
): Promise<Result<QuestionView, "absent">> {
  return db.transaction(async (tx) => {
    const answered = await tx
      .update(driverQuestion)
      .set({ answer: text, answeredById: by.id, answeredAt: sql`now()` })
      .where(eq(driverQuestion.id, id))
      .returning({ id: driverQuestion.id });
    if (answered.length === 0) return fail("absent");
    await writeAudit(tx, { actorId: by.id, action: "driver-question.answer", subject: id });
    return ok(await findQuestion(tx, by, id));
  });
}
