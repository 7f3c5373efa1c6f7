import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { edidNotes, edidOfAddress, edidOfBytes } from "@/components/screens/edid-file";
import { fillFromEdid } from "@/components/screens/fill-from-edid";
import { envelopeFromForm, formFromEnvelope } from "@/components/screens/screen-form";
import { screenPresets } from "@/lib/timing/screen-presets";
import { publishedEdids, readStandard } from "@/tests/fixtures/standards/read";

const files = new Map(publishedEdids());
const bytesOf = (file: string) => Uint8Array.from(files.get(file) ?? []);
const edidOf = (bytes: Uint8Array) => {
  const read = edidOfBytes(bytes);
  if (!read.ok) throw new Error(read.error);
  return read.value;
};
const published = readStandard<{ files: Record<string, { hmin_khz: number; hmax_khz: number; fd_offset: number }> }>(
  "edid-ranges.json",
).files;

/** The base block with its checksum put right. */
function summed(bytes: Uint8Array): Uint8Array {
  bytes[127] = -bytes.subarray(0, 127).reduce((sum, byte) => sum + byte, 0) & 0xff;
  return bytes;
}

describe("an EDID on its way from page to page", () => {
  it.each([...files.keys()])("%s is the same screen after the address", (file) => {
    const edid = edidOf(bytesOf(file));
    expect(edid.address).toMatch(/^[\w-]+$/u);
    expect(edidOfAddress(edid.address)).toEqual({ ok: true, value: edid });
    // Line rates as edid-decode prints them.
    const { hmin_khz, hmax_khz } = published[file] ?? { hmin_khz: 0, hmax_khz: 0 };
    expect(edid.screen.bands[0]?.lineRateHz).toEqual([hmin_khz * 1000, hmax_khz * 1000]);
  });

  it("is refused where the address was cut or written by hand, and never throws", () => {
    const { address } = edidOf(bytesOf("edid013.bin"));
    expect(edidOfAddress(address.slice(0, 100)).ok).toBe(false);
    expect(edidOfAddress("%%%").ok).toBe(false);
    expect(edidOfAddress("A".repeat(100_000)).ok).toBe(false);
    fc.assert(fc.property(fc.string({ maxLength: 400 }), (text) => typeof edidOfAddress(text).ok === "boolean"));
  });

  it("keeps 16 blocks of one with 255 extensions, and says so", () => {
    const long = new Uint8Array(128 * 256);
    long.set(bytesOf("edid013.bin").subarray(0, 128));
    long[126] = 255;
    summed(long);
    const edid = edidOf(long);
    expect(edid.address.length).toBeLessThan(2800);
    expect(edid.notes[0]).toContain("first 16 blocks");
    expect(edidOfAddress(edid.address).ok).toBe(true);
  });

  it("says why a file is none", () => {
    const bad = bytesOf("edid013.bin");
    bad[30] = (bad[30] ?? 0) ^ 1;
    expect(edidOfBytes(bad)).toEqual({ ok: false, error: expect.stringContaining("checksum") });
    expect(edidOfBytes(new Uint8Array(20))).toEqual({ ok: false, error: expect.stringContaining("128 bytes") });
  });
});

describe("a form filled in from an EDID", () => {
  const television = screenPresets[0];
  if (television === undefined) throw new Error("no presets");
  const typed = { ...formFromEnvelope({ ...television.envelope, name: "Workshop" }, "Red folder.") };

  it("takes what the EDID states, each limit with EDID as its source", () => {
    const edid = edidOf(bytesOf("edid013.bin"));
    const read = envelopeFromForm(fillFromEdid(formFromEnvelope({ name: "", bands: [] }, ""), edid));
    expect(read).toEqual({ ok: true, value: edid.screen });
    expect(new Set(Object.values(edid.screen.sources ?? {}))).toEqual(new Set(["edid"]));
  });

  it("loses nothing that an EDID cannot know", () => {
    const filled = fillFromEdid(typed, edidOf(bytesOf("edid013.bin")));
    expect(filled).toMatchObject({ name: "Workshop", minSyncUs: typed.minSyncUs, syncMinV: "0.2", loadOhm: "75" });
    expect(filled.notes).toMatch(/^Red folder\.\nLimits from the EDID 1\.1 of /u);
    expect(filled.sources).toMatchObject({ bands: "edid", syncVpp: "guess" });
  });

  it("notes that rates come from timings where there are no range limits", () => {
    const bytes = bytesOf("edid013.bin");
    // Another kind of descriptor (10h, unused) in the place of the range limits.
    bytes[(published["edid013.bin"]?.fd_offset ?? 0) + 3] = 0x10;
    const edid = edidOf(summed(bytes));
    expect(edid.reading.ranges).toBeUndefined();
    expect(edidNotes(edid)).toContain("It has no range limits: the rates are those of its timings");
    expect(fillFromEdid(typed, edid).bands).toHaveLength(edid.screen.bands.length);
  });
});
