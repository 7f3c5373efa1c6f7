import { eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { db } from "@/db/client";
import { demoAccounts } from "@/db/demo/accounts";
import { demoId } from "@/db/demo/demo-id";
import { demoDevices } from "@/db/demo/devices";
import { seedDemo } from "@/db/demo/seed";
import { demoProfiles } from "@/db/demo/seed-profiles";
import { findCredential } from "@/db/queries/accounts";
import { deleteBackup } from "@/db/queries/backup-acts";
import { getBackup, listBackups } from "@/db/queries/backups";
import { demoDraft, demoRecordings } from "@/db/demo/drivers";
import { listDevices } from "@/db/queries/devices";
import { getReport } from "@/db/queries/driver-reports";
import { findVersion } from "@/db/queries/drivers";
import { listRecordings, readRecording } from "@/db/queries/recordings";
import { getProfile } from "@/db/queries/revisions";
import { listScreens } from "@/db/queries/screens";
import { profile } from "@/db/schema/profile";
import { screen } from "@/db/schema/screen";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { parseDocument } from "@/lib/profile/parse";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import { parseRecording } from "@/lib/serial/recording";
import { printable } from "@/lib/serial/wire-log";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { verifyPassword } from "@/lib/server/password";

const imke = demoId("imke@saltmarsh.example");
const page = { limit: 100 };

async function counts(): Promise<unknown> {
  const { rows } = await db.execute(sql`
    select (select count(*) from "user") as people, (select count(*) from screen) as screens, (select count(*) from device) as devices,
      (select count(*) from backup) as backups, (select count(*) from backup_content) as contents,
      (select count(*) from recording) as recordings, (select count(*) from driver_version) as versions,
      (select count(*) from conformance_report) as reports, (select count(*) from driver_question) as questions,
      (select count(*) from profile) as profiles, (select count(*) from revision) as revisions`);
  return rows[0];
}

async function itemsOf<T>(
  list: Promise<{ ok: true; value: { items: readonly T[] } } | { ok: false; error: string }>,
): Promise<readonly T[]> {
  const found = await list;
  if (!found.ok) throw new Error(found.error);
  return found.value.items;
}

beforeAll(() => seedDemo(db), 300_000);

describe("the demo", () => {
  it("has recordings without a name or a serial number, a green report of each shipped driver, and a red one of the draft", async () => {
    const maren = { id: demoId("maren@saltmarsh.example"), role: "maintainer" } as const;
    const recordings = await itemsOf(listRecordings(db, maren, { ...page, mine: "false" }));
    expect(recordings).toHaveLength(2);
    const own = await itemsOf(listRecordings(db, { id: imke, role: "owner" }, { ...page, mine: "true" }));
    expect(own).toHaveLength(demoRecordings.length);
    for (const { id, struckOut, exchanges } of own) {
      expect([struckOut, exchanges > 10]).toEqual([true, true]);
      const file = await readRecording(db, { id: imke, role: "owner" }, id);
      const parsed = parseRecording(file.ok ? file.value.content : "");
      const said = parsed.ok
        ? parsed.value.lines.map((line) => (line.direction === "event" ? line.text : printable(line.bytes))).join("\n")
        : "";
      for (const { serialNumber } of demoDevices) expect(said).not.toContain(serialNumber);
      expect(said).not.toContain("Upright");
    }
    for (const { slug, version } of shippedDrivers) {
      const found = await findVersion(db, null, { slug, version });
      expect(found).toMatchObject({
        ok: true,
        value: { state: "published", origin: "shipped", report: { green: true } },
      });
    }
    const { slug, version } = demoDraft.definition;
    expect(await findVersion(db, null, { slug, version })).toEqual({ ok: false, error: "absent" });
    const draft = await findVersion(db, maren, { slug, version });
    expect(draft).toMatchObject({ ok: true, value: { state: "draft", report: { green: false } } });
    const report = await getReport(db, maren, draft.ok ? (draft.value.report?.id ?? "") : "");
    const failed = report.ok
      ? report.value.report.sections.filter((section) => section.failed > 0).map(({ name }) => name)
      : [];
    // The renamed word passes on a device made from the draft; only the recording refutes it.
    expect(failed).toEqual(["definition", "recordings"]);
  });

  it("has an account of every role and a second owner, each with the password that is printed", async () => {
    expect(new Set(demoAccounts.map(({ role }) => role))).toEqual(new Set(["owner", "maintainer", "admin"]));
    expect(demoAccounts.filter(({ role }) => role === "owner")).toHaveLength(2);
    for (const { email, password } of demoAccounts) {
      const found = await findCredential(db, email);
      expect(await verifyPassword(found?.passwordHash ?? null, password)).toBe(true);
    }
  });

  it("has backups of every device as the device said them, equal content once", async () => {
    const devices = await itemsOf(listDevices(db, imke, page));
    expect(devices).toHaveLength(demoDevices.filter(({ owner }) => owner === "imke").length);
    expect(devices.every(({ lastBackup, simulated }) => lastBackup !== null && simulated)).toBe(true);
    expect(new Set(devices.map(({ differsFromKnownGood }) => differsFromKnownGood))).toEqual(
      new Set([true, false, null]),
    );
    const backups = await itemsOf(listBackups(db, { ownerId: imke, deviceId: demoId("device cabinet-a") }, page));
    expect(backups.map(({ changedValues }) => (changedValues === null ? "first" : changedValues > 0))).toEqual([
      false,
      true,
      true,
      true,
      true,
      "first",
    ]);
    expect(backups[0]?.contentHash).toBe(backups[1]?.contentHash);
    const latest = await getBackup(db, { ownerId: imke, id: demoId("backup a5") });
    expect(latest.ok && latest.value.content.values["slots[4].colour.brightnessPct"]).toBe(132);
  });

  it("has a dozen profiles that any reader takes, some with a history", async () => {
    expect(demoProfiles.length).toBeGreaterThanOrEqual(12);
    for (const { key, revisions } of demoProfiles) {
      const found = await getProfile(db, { askerId: imke, id: demoId(`profile ${key}`) });
      if (!found.ok) throw new Error(key);
      expect(found.value.currentRevision).toBe(revisions.length);
      const read = parseDocument(JSON.stringify(found.value.revision.document));
      expect(read.ok ? read.value.unknownFields : read.error).toEqual([]);
    }
    expect(demoProfiles.filter(({ revisions }) => revisions.length > 1).length).toBeGreaterThanOrEqual(3);
  });

  it("has a finding of every family to show, and a profile that needs nothing but reading", async () => {
    const screens = await itemsOf(listScreens(db, imke, page));
    const device = deviceLimits(lanternfieldLf8, "3.2");
    const rules = new Set<string>();
    for (const { revisions } of demoProfiles) {
      for (const { document } of revisions) {
        for (const { envelope } of screens) {
          for (const { rule, severity } of checkProfile({ document, device, screen: envelope }))
            rules.add(`${rule} ${severity}`);
        }
      }
    }
    for (const wanted of [
      "shape.mode-missing stop",
      "device.range stop",
      "device.step note",
      "device.input stop",
      "device.input caution",
      "screen.line-rate stop",
      "screen.field-rate stop",
      "screen.interlace stop",
      "screen.idle caution",
      "blanking.sync stop",
      "blanking.clamp caution",
      "placement.vertical stop",
      "picture.aspect caution",
      "sync.kind stop",
      "sync.level caution",
      "rate.slip note",
      "unknown.screen caution",
    ]) {
      expect([...rules]).toContain(wanted);
    }
  });

  it("has a profile that can be applied to cabinet A once its cautions are read", async () => {
    const rested = await getBackup(db, { ownerId: imke, id: demoId("backup a5") });
    const wanted = await getProfile(db, { askerId: imke, id: demoId("profile upright-240") });
    if (!rested.ok || !wanted.ok) throw new Error("absent");
    const [cabinet] = (await itemsOf(listScreens(db, imke, page))).filter(({ name }) => name === "Cabinet A, upright");
    if (cabinet === undefined) throw new Error("no screen");
    const { content, arriving, activeSlot, rasterOut } = rested.value;
    const input = {
      backup: content,
      driver: lanternfieldLf8,
      screen: cabinet.envelope,
      source: arriving,
      activeSlot,
      rasterOut,
      leftOut: [],
      target: { kind: "profile", document: wanted.value.revision.document },
    } as const;
    const first = planChanges({ ...input, acknowledged: [] });
    expect(first.findings.filter(({ severity }) => severity === "stop")).toEqual([]);
    expect(planChanges({ ...input, acknowledged: first.toAcknowledge }).plan).not.toBeNull();
  });

  it("is loaded again without a change, and leaves alone what its people changed or deleted", async () => {
    const before = await counts();
    await db
      .update(screen)
      .set({ name: "Cabinet A, repaired" })
      .where(eq(screen.id, demoId("screen cabinet-a")));
    await db
      .update(profile)
      .set({ deletedAt: sql`now()` })
      .where(eq(profile.id, demoId("profile too-tall")));
    expect((await deleteBackup(db, { ownerId: imke, id: demoId("backup a2") })).ok).toBe(true);
    await seedDemo(db);
    expect(await counts()).toEqual(before);
    const [kept] = await db
      .select({ name: screen.name })
      .from(screen)
      .where(eq(screen.id, demoId("screen cabinet-a")));
    expect(kept?.name).toBe("Cabinet A, repaired");
    expect((await getBackup(db, { ownerId: imke, id: demoId("backup a2") })).ok).toBe(false);
    expect((await getProfile(db, { askerId: imke, id: demoId("profile too-tall") })).ok).toBe(false);
  });
});
