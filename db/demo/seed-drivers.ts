import { and, eq, inArray, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { demoId } from "@/db/demo/demo-id";
import { demoDevices } from "@/db/demo/devices";
import { demoDraft, demoQuestions, demoRecordings, type DemoQuestion, type DemoRecording } from "@/db/demo/drivers";
import type { People } from "@/db/demo/seed-people";
import { simulateRecording } from "@/db/demo/simulate-recording";
import { createDraft, storeReport } from "@/db/queries/driver-acts";
import { answerQuestion, askQuestion } from "@/db/queries/driver-questions";
import { findVersion, readDefinition, type VersionKey } from "@/db/queries/drivers";
import { createRecording, recordingsForDriver } from "@/db/queries/recordings";
import { seedShippedDrivers } from "@/db/seed-drivers";
import { driverQuestion, recording } from "@/db/schema/recording";
import { audit } from "@/db/schema/audit";
import { createRealClock } from "@/lib/serial/clock/real-clock";
import { runConformance } from "@/lib/serial/conformance/run-conformance";
import { shippedDriver, shippedDrivers } from "@/lib/serial/drivers/shipped";
import type { NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { parseRecording } from "@/lib/serial/recording";

const recordingId = (key: string) => demoId(`recording ${key}`);
const questionId = (key: string) => demoId(`driver question ${key}`);

/** The demo is loaded before anybody waits for it, so the suite tries a part of the values; the report says how many it left out. */
const DEMO_BOUNDS = { values: 400, faultPlaces: 2, wallMs: 600_000 } as const;
const MOST_RECORDINGS = 20;

async function seedRecording(
  db: Db,
  ownerId: string,
  { key, device: deviceKey, name, at, slots }: DemoRecording,
): Promise<void> {
  const one = demoDevices.find((device) => device.key === deviceKey);
  const last = one?.backups.at(-1);
  if (one === undefined || last === undefined) throw new Error(`demo recording ${key} names no device`);
  const driver = compiledDriver(shippedDriver(one.driverSlug));
  const values = Object.assign({}, ...one.backups.map(({ changes }) => changes)) as NativeValues;
  const state = {
    values,
    serialNumber: one.serialNumber,
    firmware: one.firmware,
    activeSlot: last.activeSlot,
    source: last.source,
  };
  const content = await simulateRecording(driver, { ...state, at, slots });
  const parsed = parseRecording(content);
  if (!parsed.ok) throw new Error(`demo recording ${key}: ${parsed.error[0]?.message ?? ""}`);
  const { lines } = parsed.value;
  const { slug, version } = driver.definition;
  const stored = await createRecording(db, ownerId, {
    id: recordingId(key),
    name,
    deviceId: demoId(`device ${deviceKey}`),
    driver: { slug, version },
    startedAt: new Date(at),
    struckOut: true,
    exchanges: lines.filter(({ direction }) => direction === "out").length,
    lines: lines.length,
    content,
  });
  if (!stored.ok) throw new Error(`demo recording ${key}: ${stored.error}`);
}

/** Adds the demo's recordings that were never there. */
export async function seedRecordings(db: Db, people: People): Promise<void> {
  const ids = demoRecordings.map(({ key }) => recordingId(key));
  const standing = await db.select({ id: recording.id }).from(recording).where(inArray(recording.id, ids));
  for (const one of demoRecordings) {
    const person = people.get(one.owner);
    if (person === undefined || standing.some(({ id }) => id === recordingId(one.key))) continue;
    await seedRecording(db, person.id, one);
  }
}

async function seedQuestion(
  db: Db,
  people: People,
  { key, asker, slug, text, recording: attached, answer }: DemoQuestion,
): Promise<void> {
  const [person, maintainer] = [people.get(asker), people.get("maren")];
  if (person === undefined || maintainer === undefined) return;
  const recordingOf = attached === undefined ? undefined : recordingId(attached);
  const asked = await askQuestion(
    db,
    { id: person.id, role: "owner" },
    { id: questionId(key), slug, text, recordingId: recordingOf },
  );
  // Its owner may have deleted the recording meanwhile: then the question is not loaded again either.
  if (asked.ok && answer !== undefined)
    await answerQuestion(db, { id: maintainer.id, role: "maintainer" }, questionId(key), answer);
}

async function seedQuestions(db: Db, people: People): Promise<void> {
  const ids = demoQuestions.map(({ key }) => questionId(key));
  const standing = await db
    .select({ id: driverQuestion.id })
    .from(driverQuestion)
    .where(inArray(driverQuestion.id, ids));
  for (const one of demoQuestions)
    if (!standing.some(({ id }) => id === questionId(one.key))) await seedQuestion(db, people, one);
}

/** A report of a version that has none, computed here from what is stored. */
async function seedReport(db: Db, maintainer: { readonly id: string }, key: VersionKey): Promise<void> {
  const by = { id: maintainer.id, role: "maintainer" } as const;
  const [version, stored] = [await findVersion(db, by, key), await readDefinition(db, by, key)];
  if (!version.ok || !stored.ok || version.value.report !== null) return;
  const files = await recordingsForDriver(db, by, key.slug, MOST_RECORDINGS);
  const recordings = files.flatMap(({ name, content }) => {
    const parsed = parseRecording(content);
    return parsed.ok ? [{ name, recording: parsed.value }] : [];
  });
  const report = await runConformance(stored.value.definition, {
    recordings,
    clock: createRealClock(),
    bounds: DEMO_BOUNDS,
  });
  await storeReport(db, by, key, report);
}

async function wasDrafted(db: Db, { slug, version }: VersionKey): Promise<boolean> {
  const found = await db
    .select({ id: audit.id })
    .from(audit)
    .where(
      and(
        eq(audit.action, "driver.draft"),
        sql`${audit.detail}->>'slug' = ${slug} and ${audit.detail}->>'version' = ${version}`,
      ),
    )
    .limit(1);
  return found.length > 0;
}

/** Adds the demo's draft where it never was, questions with their recordings, and a report of each version that has none. */
export async function seedDrivers(db: Db, people: People): Promise<void> {
  await seedShippedDrivers(db);
  await seedRecordings(db, people);
  await seedQuestions(db, people);
  const maintainer = people.get(demoDraft.author);
  if (maintainer === undefined) return;
  const { slug, version, maker, model } = demoDraft.definition;
  // A draft that a maintainer discarded does not come back.
  if (!(await wasDrafted(db, { slug, version }))) {
    const values = { slug, version, maker, model, definition: demoDraft.definition, note: demoDraft.note };
    await createDraft(db, { id: maintainer.id, role: "maintainer" }, values);
  }
  for (const key of [...shippedDrivers, demoDraft.definition]) await seedReport(db, maintainer, key);
}
