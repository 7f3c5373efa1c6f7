import { describe, expect, it } from "vitest";
import { readText, textOf } from "@/components/drivers/editor/reading";
import { driverFacts, nextVersion, settingRows, valueWords } from "@/components/drivers/driver-words";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";

const text = textOf(lanternfieldLf8);

describe("reading the text of a driver editor", () => {
  it("compiles what is sound, and can save it", () => {
    const reading = readText(text);
    expect(reading.problems).toEqual([]);
    expect(reading.driver?.definition.slug).toBe("lanternfield-lf8");
    expect(reading.savable?.version).toBe("1.0.0");
  });

  it("names a mistake by its path and the line that it stands in, and can still save the draft", () => {
    const reading = readText(text.replace('"baudRate": 115200', '"baudRate": 12'));
    const [problem] = reading.problems;
    expect(problem?.path).toBe("transport.baudRate");
    expect(reading.text.split("\n")[(problem?.line ?? 0) - 1]).toContain('"baudRate": 12');
    expect(reading.driver).toBeNull();
    expect(reading.savable).not.toBeNull();
  });

  it("says the line at which a text stops to be JSON, and cannot save it", () => {
    const broken = text.replace('"parity": "none",', '"parity": none,');
    const reading = readText(broken);
    expect(broken.split("\n")[(reading.problems[0]?.line ?? 0) - 1]).toContain('"parity": none,');
    expect(reading.savable).toBeNull();
  });

  it("cannot save what does not name itself", () => {
    expect(readText('{"slug": "x"}').savable).toBeNull();
  });
});

describe("the text of a definition", () => {
  it("has its fields in the order of the format, whatever order they come in, and says the same", () => {
    // Orders a text as the database does: by length of the name, then by its letters.
    const byLength = (value: unknown): unknown => {
      if (Array.isArray(value)) return value.map(byLength);
      if (typeof value !== "object" || value === null) return value;
      const fields = Object.entries(value).sort(([a], [b]) => a.length - b.length || (a < b ? -1 : 1));
      return Object.fromEntries(fields.map(([name, inner]) => [name, byLength(inner)]));
    };
    const shown = textOf(byLength(lanternfieldLf8));
    expect(JSON.parse(shown)).toEqual(JSON.parse(JSON.stringify(lanternfieldLf8)));
    expect(Object.keys(JSON.parse(shown) as object).slice(0, 6)).toEqual(["format", "formatVersion", "maker", "model", "slug", "version"]);
    expect(textOf(JSON.parse(shown))).toBe(shown);
  });
});

describe("a driver in words", () => {
  it.each(shippedDrivers.map((driver) => [driver.slug, driver] as const))("says every fact and every setting of %s", (_slug, driver) => {
    for (const { name, words } of driverFacts(driver)) expect(`${name}: ${words}`).not.toMatch(/undefined|NaN|\[object/u);
    const rows = settingRows(driver);
    expect(rows).toHaveLength(driver.settings.length);
    for (const row of rows) expect(Object.values(row).join(" ")).not.toMatch(/undefined|NaN|\[object/u);
  });

  it("shows ranges as the pages show values: neutral, with unit and step", () => {
    const range = (key: string) => settingRows(lanternfieldLf8).find((row) => row.key === key)?.range;
    expect(range("slots[*].placement.offsetPx")).toBe("−64 … 63\u00A0px");
    expect(range("slots[*].placement.widthPct")).toBe("80 … 120\u00A0%, in steps of 0.4");
  });

  it("says of a line without a check that it has none", () => {
    if (lanternfieldLf8.protocol.kind !== "text") throw new Error("not a text device");
    const { check: _check, ...protocol } = lanternfieldLf8.protocol;
    const facts = driverFacts({ ...lanternfieldLf8, protocol });
    expect(facts.find(({ name }) => name === "Protocol")?.words).toContain("a flipped byte can be another valid value");
  });

  it("counts the next version, and keeps long values short", () => {
    expect([nextVersion("1.0.3"), nextVersion("1.9999.0")]).toEqual(["1.1.0", "2.0.0"]);
    expect(valueWords({ a: "x".repeat(1000) }).length).toBeLessThan(200);
    expect(valueWords(null)).toBe("–");
  });
});
