import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { convertModeline } from "@/lib/timing/modeline/convert-modeline";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";
import { parseModeline } from "@/lib/timing/modeline/parse-modeline";
import type { RasterTiming } from "@/lib/timing/raster";
import { standardRaster } from "@/lib/timing/standards";

const read = (text: string) => {
  const parsed = parseModeline(text);
  if (!parsed.ok) throw new Error(parsed.error.message);
  return parsed.value;
};
const code = (text: string) => {
  const parsed = parseModeline(text);
  return parsed.ok ? "read" : parsed.error.code;
};

const axis = fc.record({
  active: fc.integer({ min: 1, max: 4000 }),
  frontPorch: fc.integer({ min: 0, max: 500 }),
  sync: fc.integer({ min: 0, max: 500 }),
  backPorch: fc.integer({ min: 0, max: 500 }),
  polarity: fc.constantFrom("positive" as const, "negative" as const),
});
const anyTiming: fc.Arbitrary<RasterTiming> = fc
  .record({
    pixelClockHz: fc.integer({ min: 10_000, max: 999_999_999 }),
    scan: fc.constantFrom("progressive", "interlaced", "equal"),
    horizontal: axis,
    vertical: axis,
  })
  .map(({ scan, ...rest }) => ({
    ...rest,
    interlaced: scan !== "progressive",
    ...(scan === "equal" ? { equalFields: true } : {}),
  }));

describe("modelines out and in", () => {
  it("come back as the timing they were, and as the line they were", () => {
    fc.assert(
      fc.property(anyTiming, (timing) => {
        const line = formatModeline(timing, "a name");
        expect(read(line)).toEqual({ name: "a name", timing, notes: [] });
        expect(formatModeline(read(line).timing, "a name")).toBe(line);
      }),
    );
  });

  it("do so for every published raster", () => {
    for (const { timing } of catalogue) expect(read(formatModeline(timing)).timing).toEqual(timing);
  });

  it("count frame lines where interlaced", () => {
    // Source: xorg.conf(5): vertical figures of an interlaced mode count the lines of both fields. CTA-861 code 6.
    expect(formatModeline(standardRaster("480i60").timing)).toBe(
      'Modeline "480i60" 27.00 1440 1478 1602 1716 480 488 494 525 -HSync -VSync Interlace',
    );
  });

  it("keep a name on one line and between its quotation marks", () => {
    const { timing } = standardRaster("240p60");
    const line = formatModeline(timing, 'a"b\nc');
    expect(read(line)).toMatchObject({ name: "abc", timing });
  });
});

describe("modelines in", () => {
  const line = "27.000 1440 1478 1602 1716 240 244 247 262";

  it.each([
    `Modeline "240p" ${line} -hsync -vsync`,
    `  MODELINE   "240p"\t${line.replaceAll(" ", "   ")}   -HSync   -VSync  `,
    `# from a file\n\nModeLine 240p ${line} -HSync -VSync # trailing\n`,
    `"240p" ${line} -hsync -vsync`,
  ])("take %j", (text) => {
    expect(read(text)).toEqual({ name: "240p", timing: standardRaster("240p60").timing, notes: [] });
  });

  it("take a line without a name, and say which polarity they assumed", () => {
    const parsed = read(`${line} +hsync`);
    expect(parsed.name).toBe("");
    expect(parsed.timing.horizontal.polarity).toBe("positive");
    expect(parsed.timing.vertical.polarity).toBe("negative");
    expect(parsed.notes.join()).toContain("No vertical polarity");
  });

  it("take a name that is a number or holds a comment's sign", () => {
    expect(read(`Modeline 240 ${line} -hsync -vsync`).name).toBe("240");
    expect(read(`Modeline "a # b" ${line} -hsync -vsync`).name).toBe("a # b");
  });

  it("double the lines of a doublescan mode", () => {
    // Source: xorg.conf(5): DoubleScan sends each line twice. 320 × 240 doubled is the 525 lines of 480p.
    const parsed = read('Modeline "320x240" 12.5875 320 328 376 400 240 245 246 262 -HSync -VSync DoubleScan');
    expect(parsed.timing.vertical).toMatchObject({ active: 480, frontPorch: 10, sync: 2, backPorch: 32 });
    expect(parsed.timing.pixelClockHz).toBe(12_587_500);
  });

  it("refuse what has no whole number of field lines, and never round", () => {
    const interlaced = (vertical: string) => code(`Modeline "x" 27 1440 1478 1602 1716 ${vertical} Interlace`);
    expect(interlaced("480 488 494 525")).toBe("read");
    expect(interlaced("480 487 494 525")).toBe("half-line");
    expect(interlaced("480 488 493 525")).toBe("half-line");
    expect(interlaced("481 488 494 525")).toBe("half-line");
    // An even frame is two equal fields: CTA-861 code 39 (1250 lines).
    expect(
      read('Modeline "39" 72 1920 1952 2120 2304 1080 1126 1136 1250 +HSync -VSync Interlace').timing.equalFields,
    ).toBe(true);
  });

  it.each([
    ["", "empty"],
    ["# nothing", "empty"],
    ['Modeline "x 27 1440', "name"],
    [`Modeline "x" ${line}\nModeline "y" ${line}`, "several"],
    ['Modeline "x" 27 1440 1478', "figures"],
    ['Modeline "x" NaN 1440 1478 1602 1716 240 244 247 262', "number"],
    ['Modeline "x" 27 -1440 1478 1602 1716 240 244 247 262', "number"],
    ['Modeline "x" 27 1440.5 1478 1602 1716 240 244 247 262', "number"],
    ['Modeline "x" 27 99999999999999999999 1478 1602 1716 240 244 247 262', "number"],
    ['Modeline "x" 1e400 1440 1478 1602 1716 240 244 247 262', "number"],
    ['Modeline "x" 27 1440 1400 1602 1716 240 244 247 262', "order"],
    ['Modeline "x" 27 1440 1478 1602 1716 240 244 247 246', "order"],
    [`Modeline "x" ${line} HSkew 3`, "flag"],
    ['Modeline "x" 0 1440 1478 1602 1716 240 244 247 262', "raster"],
    ['Modeline "x" 27 0 0 0 0 240 244 247 262', "raster"],
    ['Modeline "x" 27 900000 900000 900000 900000 240 244 247 262', "raster"],
    [`Modeline ${'"'.repeat(1_000_000)}`, "too-long"],
    ["\n".repeat(1_999), "empty"],
  ])("refuse %.60j as %s", (text, expected) => {
    expect(code(text)).toBe(expected);
  });

  it("answer any text at all without an exception", () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 3000, unit: "binary" }), (text) => {
        const parsed = parseModeline(text);
        if (!parsed.ok) expect(parsed.error.message).not.toBe("");
      }),
    );
  });
});

describe("convertModeline", () => {
  it("gives name, timing and line for either kind of input", () => {
    const { timing } = standardRaster("240p60");
    const out = convertModeline({ timing });
    expect(out.ok && out.value).toMatchObject({ name: "240p60", timing });
    const back = convertModeline({ modeline: out.ok ? out.value.modeline : "" });
    expect(back.ok && back.value).toMatchObject({ name: "240p60", timing, modeline: out.ok ? out.value.modeline : "" });
  });

  it("says by path what is wrong", () => {
    const { timing } = standardRaster("240p60");
    const bad = convertModeline({ timing: { ...timing, pixelClockHz: -1 } });
    expect(!bad.ok && bad.error.map(({ path }) => path)).toEqual(["timing.pixelClockHz"]);
    const text = convertModeline({ modeline: "no" });
    expect(!text.ok && text.error.map(({ path }) => path)).toEqual(["modeline"]);
  });
});
