import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { edidScreen, envelopeOfEdid } from "@/lib/timing/edid/edid-screen";
import { parseEdid } from "@/lib/timing/edid/parse-edid";
import { envelopeProblems } from "@/lib/timing/envelope-problems";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { publishedEdids, readStandard } from "@/tests/fixtures/standards/read";

type Published = {
  vmin: number;
  vmax: number;
  hmin_khz: number;
  hmax_khz: number;
  maxpclk_mhz: number;
  edid_version: string;
  input: string;
  fd_offset: number;
};

const ranges = readStandard<{ files: Record<string, Published> }>("edid-ranges.json").files;
const files = new Map(publishedEdids());
const bytesOf = (file: string) => {
  const bytes = files.get(file);
  if (bytes === undefined) throw new Error(`${file} is missing`);
  return Uint8Array.from(bytes);
};
const read = (bytes: Uint8Array) => {
  const parsed = parseEdid(bytes);
  if (!parsed.ok) throw new Error(parsed.error.message);
  return parsed.value;
};
const code = (bytes: Uint8Array) => {
  const parsed = parseEdid(bytes);
  return parsed.ok ? "read" : parsed.error.code;
};

/** The block with its last byte set so that it adds up. */
function summed(bytes: Uint8Array, block = 0): Uint8Array {
  const [from, last] = [block * 128, block * 128 + 127];
  const sum = bytes.subarray(from, last).reduce((total, byte) => total + byte, 0);
  bytes[last] = (256 - (sum % 256)) % 256;
  return bytes;
}

describe("EDIDs in the wild", () => {
  it("are all here", () => {
    expect([...files.keys()]).toEqual(Object.keys(ranges).sort());
    expect(files.size).toBeGreaterThan(40);
  });

  // Source: tests/fixtures/standards/edid-ranges.json, as edid-decode prints them.
  it.each(Object.entries(ranges))("%s gives the limits that edid-decode prints", (file, published) => {
    const reading = read(bytesOf(file));
    expect(reading.version).toBe(published.edid_version);
    expect(reading.input).toBe(published.input);
    expect(reading.ranges?.fieldRateHz).toEqual([published.vmin, published.vmax]);
    expect(reading.ranges?.lineRateHz).toEqual([published.hmin_khz * 1000, published.hmax_khz * 1000]);
    expect(reading.ranges?.maxPixelClockHz).toBe(published.maxpclk_mhz * 1e6);
    const { screen } = envelopeOfEdid(reading);
    expect(screen.bands).toEqual([
      { lineRateHz: reading.ranges?.lineRateHz, fieldRateHz: reading.ranges?.fieldRateHz },
    ]);
    expect(screen.sources?.bands).toBe("edid");
    expect(envelopeProblems(screen)).toEqual([]);
  });

  it("give only rasters, with the blocks that they state", () => {
    for (const [, bytes] of files) {
      const { timings } = read(bytes);
      expect(timings.length).toBeGreaterThan(0);
      expect(timings.flatMap(({ timing }) => rasterProblems(timing))).toEqual([]);
    }
  });
});

describe("an EDID without range limits", () => {
  const withoutRanges = (file: string) => {
    const bytes = bytesOf(file);
    // Tag 10h is a dummy descriptor.
    bytes[(ranges[file]?.fd_offset ?? 0) + 3] = 0x10;
    return summed(bytes);
  };

  it("gives an envelope from its timings, which they all fit, and says so", () => {
    for (const file of files.keys()) {
      const bytes = withoutRanges(file);
      const result = edidScreen(bytes);
      if (!result.ok) throw new Error(result.error.message);
      const { screen, notes } = result.value;
      expect(notes[0]).toContain("no range limits");
      expect(envelopeProblems(screen)).toEqual([]);
      if (notes.some((note) => note.includes("left out"))) continue;
      for (const { timing } of read(bytes).timings) expect(fitsEnvelope(timing, screen)).toBe(true);
    }
  });

  it("leaves the rates unknown where it has no timings either", () => {
    const bytes = withoutRanges("edid013.bin").slice(0, 128);
    for (const offset of [54, 72, 90, 108]) bytes.set([0, 0, 0, 0x10], offset);
    bytes.fill(0, 0x23, 0x26);
    bytes.fill(1, 0x26, 0x36);
    bytes[126] = 0;
    const result = edidScreen(summed(bytes));
    expect(result.ok && result.value.screen.bands).toEqual([]);
    expect(result.ok && result.value.notes[0]).toContain("not known");
  });
});

describe("bytes that are no good EDID", () => {
  const good = bytesOf("edid009.bin");

  it.each([0, 1, 64, 127])("cut to %i bytes are refused", (length) => {
    expect(code(good.slice(0, length))).toBe("too-short");
  });

  it("with a wrong header or checksum are refused", () => {
    expect(code(good.map((byte, index) => (index === 3 ? 0 : byte)))).toBe("header");
    expect(code(good.map((byte, index) => (index === 60 ? byte ^ 1 : byte)))).toBe("checksum");
  });

  it("cut in an extension, or with a wrong checksum there, are read without it", () => {
    const cut = read(good.slice(0, 200));
    expect(cut.warnings.join()).toContain("1 extension blocks follow, and 0 do");
    expect(cut.warnings.join()).toContain("cut short");
    const spoilt = read(good.map((byte, index) => (index === 140 ? byte ^ 0xff : byte)));
    expect(spoilt.warnings.join()).toContain("The checksum of extension 1 is wrong");
    expect(spoilt.timings.length).toBeLessThan(read(good).timings.length);
  });

  it("with 255 extensions are read, and with more refused", () => {
    const many = new Uint8Array(256 * 128);
    many.set(good.slice(0, 128));
    many[126] = 255;
    summed(many);
    for (let block = 1; block < 256; block += 1) many.set(good.slice(128, 256), block * 128);
    const { timings, warnings } = read(many);
    expect(warnings).toEqual(read(good).warnings);
    expect(timings.length).toBeGreaterThan(255);
    expect(edidScreen(many).ok).toBe(true);
    expect(code(new Uint8Array(257 * 128))).toBe("too-long");
  });

  it("of any kind are answered without an exception, behind a header and a checksum that hold", () => {
    fc.assert(
      fc.property(fc.uint8Array({ minLength: 128, maxLength: 640 }), (random) => {
        const bytes = Uint8Array.from(random);
        bytes.set([0, 255, 255, 255, 255, 255, 255, 0]);
        summed(bytes);
        for (let block = 1; (block + 1) * 128 <= bytes.length; block += 1) {
          bytes[block * 128] = 2;
          summed(bytes, block);
        }
        const reading = read(bytes);
        expect(reading.timings.flatMap(({ timing }) => rasterProblems(timing))).toEqual([]);
        expect(envelopeProblems(envelopeOfEdid(reading).screen)).toEqual([]);
      }),
    );
  });
});

describe("the exact pixel clock of a CVT descriptor", () => {
  it("is told beside the rounded one", () => {
    // Source: edid-decode on edid047.bin: "max dotclock 170 MHz", "Real max dotclock: 165.00 MHz".
    expect(read(bytesOf("edid047.bin")).ranges).toMatchObject({ maxPixelClockHz: 170e6, exactPixelClockHz: 165e6 });
  });
});
