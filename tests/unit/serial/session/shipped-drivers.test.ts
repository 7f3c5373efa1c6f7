import { describe, expect, it } from "vitest";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { nativeFromDocument } from "@/lib/serial/backup/document";
import { nativeProblem } from "@/lib/serial/driver/compile";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { parseRecording, saveRecording } from "@/lib/serial/recording";
import { printable } from "@/lib/serial/wire-log";
import { compiled, connect, lf8 } from "@/tests/unit/serial/simulated-rig";

describe.each(shippedDrivers.map((definition) => [definition.slug, definition] as const))("%s", (_slug, definition) => {
  const driver = compiled(definition);

  it("is data, and every initial value is one that the device holds", () => {
    expect(driverDefinitionSchema.parse(JSON.parse(JSON.stringify(definition)))).toEqual(definition);
    expect(driver.settings.filter(({ value, initial }) => nativeProblem(value, initial) !== null)).toEqual([]);
  });

  it("is backed up exactly: every value as the device holds it, and back from the document", async () => {
    const rig = await connect(driver);
    const backup = await rig.clock.run(takeBackup(rig.session, driver));
    if (!backup.ok) throw new Error(backup.error.message);
    const { values, unreadable, document } = backup.value.content;
    expect({ ...values, ...Object.fromEntries(unreadable.map((key) => [key, rig.device.working[key]])) }).toEqual(rig.device.working);
    expect(nativeFromDocument(driver, document, values)).toEqual(values);
    expect(backup.value).toMatchObject({ identity: rig.device.identity, activeSlot: 1, arriving: rig.device.source });
    expect(rig.device.counts).toMatchObject({ writes: 0, recalls: 0, commits: 0, refusals: 0 });
    await rig.clock.run(rig.session.close());
    expect(rig.clock.pendingTimers()).toBe(0);
  });

  it("takes every setting at its least and its greatest and refuses what is beyond", async () => {
    const rig = await connect(driver);
    const patterns = new Map(driver.settings.map((setting) => [setting.pattern, setting]));
    for (const { key, value, number, scope } of patterns.values()) {
      if (value.type !== "integer" || key.includes("placement") || key.includes("timing") || key.endsWith(".mode")) continue;
      const block = driver.settings.filter((other) => driver.codec.kind === "packet" && other.scope === scope && other.number === number && sameBlock(other, key));
      const writesOf = (native: number) => (block.length === 0 ? [{ key, value: native }] : block.map((other) => ({ key: other.key, value: other.key === key ? native : (rig.device.working[other.key] ?? 0) })));
      for (const native of [value.min, value.max]) {
        expect(await rig.clock.run(rig.session.write(writesOf(native)))).toEqual({ ok: true, value: { outcome: "acknowledged" } });
        expect(rig.device.working[key]).toBe(native);
      }
      const wide = driver.codec.kind === "text" ? value.max + value.step : null;
      if (wide !== null) expect(await rig.clock.run(rig.session.write(writesOf(wide)))).toMatchObject({ ok: false, error: { code: "refused" } });
      expect(rig.device.working[key]).toBe(value.max);
    }
    await rig.clock.run(rig.session.close());
  });

  function sameBlock(other: (typeof driver.settings)[number], key: string): boolean {
    const [mine, theirs] = [driver.byKey.get(key)?.source.wire, other.source.wire];
    return mine?.kind === "packet" && theirs.kind === "packet" && mine.field.block === theirs.field.block;
  }

  it("makes a slot active once and says which one is", async () => {
    const rig = await connect(driver);
    expect(await rig.clock.run(rig.session.recall(2))).toEqual({ ok: true, value: { outcome: "acknowledged" } });
    expect(await rig.clock.run(rig.session.activeSlot())).toEqual({ ok: true, value: 2 });
    expect(await rig.clock.run(rig.session.recall(driver.definition.slots.count))).toMatchObject({ ok: false, error: { code: "refused" } });
    expect(rig.device.counts.recalls).toBe(1);
    await rig.clock.run(rig.session.close());
  });

  it("leaves no name and no serial number in a recording that was struck out", async () => {
    const rig = await connect(driver, { serialNumber: "QZ-7731-88", values: { "slots[1].name": "SECRET" } });
    expect((await rig.clock.run(takeBackup(rig.session, driver))).ok).toBe(true);
    await rig.clock.run(rig.session.close());
    const said = (strikeOut: boolean) => {
      const parsed = parseRecording(saveRecording(driver, rig.wireLog.entries(), { strikeOut }));
      if (!parsed.ok) throw new Error(parsed.error[0]?.message);
      return parsed.value.lines;
    };
    const text = (lines: ReturnType<typeof said>) => lines.map((line) => (line.direction === "event" ? line.text : printable(line.bytes))).join("\n");
    expect(text(said(false))).toContain("SECRET");
    expect(text(said(false))).toContain("QZ-7731-88");
    for (const secret of ["SECRET", "QZ-7731", "7731-88"]) expect(text(said(true))).not.toContain(secret);
    for (const line of said(true)) if (line.direction === "in") expect(driver.codec.createDecoder().push(line.bytes)).toMatchObject([{ kind: "frame" }]);
  });
});

describe("a mute", () => {
  it("puts nothing out until it is lifted, and the LF-8 has none", async () => {
    const definition = shippedDrivers.find((one) => one.actions.muteOn);
    if (!definition) throw new Error("no driver has a mute");
    const rig = await connect(compiled(definition));
    expect(await rig.clock.run(rig.session.mute(true))).toMatchObject({ ok: true });
    expect(rig.device.rasterOut).toBeNull();
    expect(await rig.clock.run(rig.session.mute(false))).toMatchObject({ ok: true });
    expect(rig.device.rasterOut).not.toBeNull();
    await rig.clock.run(rig.session.close());
    expect(lf8.definition.actions.muteOn).toBeUndefined();
  });
});
