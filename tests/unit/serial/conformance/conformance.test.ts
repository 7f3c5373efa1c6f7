import { describe, expect, it } from "vitest";
import { hashValue } from "@/lib/profile/canonical";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { createRealClock } from "@/lib/serial/clock/real-clock";
import { conformanceReportSchema, SECTION_NAMES, SIMULATED_SENTENCE, type ConformanceReport } from "@/lib/serial/conformance/report";
import { runConformance, type ConformanceOptions } from "@/lib/serial/conformance/run-conformance";
import { planValues } from "@/lib/serial/conformance/values-to-try";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { MAX_SETTINGS } from "@/lib/serial/driver/definition";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { compiled } from "@/tests/unit/serial/simulated-rig";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

const clock = createRealClock();
const [lf8, brackenrow, ternwick] = smallDrivers as [DriverDefinition, DriverDefinition, DriverDefinition];
/** Enough to try everything once; the bounds of the suite itself are tried below. */
const few = { values: 60, faultPlaces: 1, wallMs: 600_000 } as const;
/** Enough for the sections before the settings. */
const fewest = { ...few, exchanges: 150 } as const;

const run = (definition: unknown, options: Partial<ConformanceOptions> = {}): Promise<ConformanceReport> => runConformance(definition, { clock, bounds: few, ...options });
const failures = (report: ConformanceReport) => Object.fromEntries(report.sections.filter(({ failed }) => failed > 0).map(({ name, cases }) => [name, cases.map((one) => `${one.name}: ${one.message}`)]));
const edited = (definition: DriverDefinition, edit: (text: string) => string): unknown => {
  const text = JSON.stringify(definition);
  const other = edit(text);
  expect(other).not.toBe(text);
  return JSON.parse(other);
};

describe("a suite of conformance", () => {
  it.each(smallDrivers.map((definition) => [definition.slug, definition] as const))("finds nothing wrong with %s, and says what it proves", { timeout: 120_000 }, async (_slug, definition) => {
    const report = await run(definition);
    expect(failures(report)).toEqual({});
    expect(report.green).toBe(true);
    expect(conformanceReportSchema.parse(JSON.parse(JSON.stringify(report)))).toEqual(report);
    expect(report.sections.map(({ name }) => name)).toEqual(SECTION_NAMES);
    for (const { name, passed } of report.sections) if (name !== "recordings") expect(passed, name).toBeGreaterThan(0);
    expect(report.driverHash).toBe(hashValue(definition));
    expect(report.simulatedSentence).toBe(SIMULATED_SENTENCE);
    expect(report.sections.at(-1)?.notes).toEqual(["There is no recording, so nothing here speaks for hardware."]);
  });

  it("tries every setting of every slot and mode of the shipped drivers, each at its least, greatest, one step and beyond", () => {
    for (const definition of shippedDrivers) {
      const driver = compiled(definition);
      const { cases, leftOut } = planValues(driver, 6000);
      expect(leftOut).toBe(0);
      for (const setting of driver.settings.filter(({ writable }) => writable)) {
        const own = cases.filter((one) => one.setting.key === setting.key);
        if (setting.value.type === "integer") {
          expect(own.filter(({ valid }) => valid).map(({ value }) => value)).toEqual(expect.arrayContaining([setting.value.min, setting.value.min + setting.value.step]));
          expect(own.some(({ what, valid }) => what === "beyond" && !valid)).toBe(true);
        }
        if (setting.value.type === "choice") expect(own.filter(({ valid }) => valid)).toHaveLength(setting.value.choices.length);
        if (setting.value.type === "text") expect(own.some(({ value }) => String(value).length === (setting.value.type === "text" ? setting.value.maxLength : 0))).toBe(true);
      }
    }
  });

  // Each is wrong in one way, and the section that has to notice it is named.
  it.each<[string, DriverDefinition, (text: string) => string, string]>([
    ["a slot that takes modes beyond the last", lf8, (text) => text.replace('"label":"Output mode","value":{"type":"integer","min":0,"max":2', '"label":"Output mode","value":{"type":"integer","min":0,"max":9'), "definition"],
    ["volatile writes without an order that stores", brackenrow, (text) => text.replace(/"commit":\{"kind":"modbus".*?\]\s*,"value":\d+\},/u, ""), "definition"],
    ["two choices with one meaning", ternwick, (text) => text.replace('"neutral":"positive"', '"neutral":"negative"'), "definition"],
    ["a reply longer than the wait", brackenrow, (text) => text.replace('"baudRate":38400', '"baudRate":300').replace('"replyTimeoutMs":300', '"replyTimeoutMs":10'), "definition"],
    ["a line too short for its own replies", lf8, (text) => text.replace('"maxLineBytes":128', '"maxLineBytes":16'), "reading"],
    ["a word with a blank in it", lf8, (text) => text.replaceAll('"native":"FULL"', '"native":"FU LL"').replaceAll('"initial":"FULL"', '"initial":"FU LL"'), "reading"],
    ["a number shown with more places than it has", lf8, (text) => text.replace('"request":"SYST:FAN {value:int}","reply":"SYST:FAN={value:int}"', '"request":"SYST:FAN {value:int}","reply":"SYST:FAN={value:word}"'), "definition"],
  ])("notices %s", { timeout: 120_000 }, async (_what, definition, edit, section) => {
    const report = await run(edited(definition, edit), { bounds: fewest });
    expect(report.green).toBe(false);
    expect(Object.keys(failures(report))).toContain(section);
  });

  it("does not claim for a line without a check that no wrong value is read", { timeout: 120_000 }, async () => {
    const { protocol } = lf8;
    if (protocol.kind !== "text") throw new Error("the LF-8 speaks text");
    const { check: _check, ...unchecked } = protocol;
    const report = await run({ ...lf8, protocol: unchecked }, { bounds: fewest });
    expect(report.sections[0]?.notes.join()).toContain("has no check");
  });

  it("counts all failures and lists fifty at most, each cut short", async () => {
    const settings = Array.from({ length: 90 }, (_, index) => ({ key: `native.a${index}`, label: "x", value: { type: "integer", min: 5, max: 1 }, initial: 0, wire: { kind: "text" } }));
    const report = await run({ ...lf8, settings, factory: {} });
    const [definition] = report.sections;
    expect(definition?.cases).toHaveLength(50);
    expect(definition?.failed).toBeGreaterThanOrEqual(90);
    expect(report.sections.slice(1).every(({ stopped }) => stopped !== null)).toBe(true);
  });

  it("ends when it is called off, and then is not green", async () => {
    const controller = new AbortController();
    const report = await run(lf8, { signal: controller.signal, onSection: ({ name }) => name === "reading" && controller.abort() });
    expect(report.green).toBe(false);
    expect(report.sections.map(({ stopped }) => stopped !== null)).toEqual([false, false, true, true, true, true, true]);
  });

  it("ends when its time, its exchanges or its bytes are used up, and says so", async () => {
    const late = createVirtualClock();
    const report = await run(lf8, { clock: late, bounds: { ...few, wallMs: 1000 }, onSection: ({ name }) => name === "reading" && void late.advance(5000) });
    expect(report.sections[2]?.stopped).toBe("The suite was ended after 1 s.");
    for (const bounds of [{ exchanges: 30 }, { bytes: 900 }]) {
      const short = await run(lf8, { bounds: { ...few, ...bounds } });
      expect(short.green).toBe(false);
      expect(short.sections.some(({ stopped }) => stopped?.startsWith("The suite was ended after"))).toBe(true);
    }
  });
});

/** What a stranger may send. Each has to end within the suite's bounds, without an exception, and not green. */
const manySettings = Array.from({ length: 512 }, (_, index) => ({
  key: `slots[*].native.s${index}`, label: "x", value: { type: "integer", min: 0, max: 1_000_000_000 }, initial: 0,
  wire: { kind: "text", read: { request: `S{slot:int}:${"Q".repeat(150)}${index}?`, reply: `S{slot:int}:${"Q".repeat(150)}${index}={value:int}` } },
}));
const hostile: readonly (readonly [string, unknown])[] = [
  ["nothing", null], ["a number", 7], ["a list", []], ["no fields", {}], ["a foreign format", { format: "other" }],
  ["zero baud", { ...lf8, transport: { ...lf8.transport, baudRate: 0 } }],
  ["a range beyond what a number holds", edited(lf8, (text) => text.replace('"max":255', '"max":1e400'))],
  ["nesting without end", JSON.parse(`${'{"a":'.repeat(3000)}1${"}".repeat(3000)}`)],
  ["half a surrogate pair", { ...lf8, maker: "\ud800" }], ["a character of code 0", { ...lf8, maker: "a\0b" }],
  ["too many settings when counted out", { ...lf8, slots: { first: 1, count: 256, emptyMode: 0 }, settings: manySettings, factory: {} }],
  ["an order whose argument nobody gives", { ...lf8, actions: { ...lf8.actions, commit: { kind: "text", request: "MEM {what:int}", reply: "OK" } } }],
  ["requests that all begin alike", edited(lf8, (text) => text.replaceAll("TRIM:LEFT", "TRIM:RIGHT"))],
  ["lines of its own in a template", edited(lf8, (text) => text.replaceAll("SYST:FAN", "SYST\\nFAN"))],
  ["a start without end", { ...lf8, boot: { takesMs: 60_000, chatter: Array.from({ length: 8 }, () => "*".repeat(80)) }, pace: { ...lf8.pace, replyTimeoutMs: 60_000, retries: 5, workMs: 1000 }, protocol: { ...lf8.protocol, maxLineBytes: 16 } }],
];

describe("a definition from a stranger", () => {
  it.each(hostile)("with %s ends, and is not green", { timeout: 180_000 }, async (_what, definition) => {
    const report = await run(definition, { bounds: fewest });
    expect(report.green).toBe(false);
    expect(conformanceReportSchema.parse(report)).toEqual(report);
    // One whole read of the device may go past the bound, and nothing after it.
    expect(report.exchanges).toBeLessThan(fewest.exchanges + 600);
  });

  it("with as many settings as there may be ends within its bounds", { timeout: 180_000 }, async () => {
    const count = Math.floor(MAX_SETTINGS / 2);
    const wide = { ...lf8, slots: { first: 1, count: 8, emptyMode: 0 }, settings: [...lf8.settings, ...manySettings.slice(0, Math.floor(count / 8))].slice(0, 512) };
    const report = await run(wide, { bounds: { ...few, exchanges: 1000 } });
    expect(report.exchanges).toBeLessThan(1000 + MAX_SETTINGS);
    expect(report.sections).toHaveLength(SECTION_NAMES.length);
  });
});
