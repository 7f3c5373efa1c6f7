import { describe, expect, it } from "vitest";
import { emptyBand, envelopeFromForm, formFromEnvelope } from "@/components/screens/screen-form";
import { screenPresets } from "@/lib/timing/screen-presets";

const preset = screenPresets[0];
if (preset === undefined) throw new Error("no presets");
const form = () => formFromEnvelope(preset.envelope, "");

describe("screen form", () => {
  it.each(screenPresets.map((each) => [each.id, each] as const))("gives %s back as it was", (_, each) => {
    expect(envelopeFromForm(formFromEnvelope(each.envelope, ""))).toEqual({ ok: true, value: each.envelope });
  });

  it("takes kHz and MHz as Hz, without the dust of the arithmetic", () => {
    const read = envelopeFromForm({
      ...form(),
      maxPixelClockMhz: "13,513",
      bands: [{ lineMinKhz: "15.734", lineMaxKhz: "15.89", fieldMinHz: "48", fieldMaxHz: "62" }],
    });
    expect(read).toMatchObject({
      ok: true,
      value: { maxPixelClockHz: 13_513_000, bands: [{ lineRateHz: [15_734, 15_890] }] },
    });
  });

  it("leaves out what is not known, its source with it", () => {
    const read = envelopeFromForm({ ...form(), minSyncUs: "", syncMinV: "", syncMaxV: "", aspect: "" });
    if (!read.ok) throw new Error("refused");
    expect(read.value).not.toHaveProperty("minSyncUs");
    expect(read.value).not.toHaveProperty("syncVpp");
    expect(Object.keys(read.value.sources ?? {})).not.toContain("minSyncUs");
    expect(Object.keys(read.value.sources ?? {})).toContain("bands");
  });

  it.each([
    [{ name: "  " }, "name"],
    [{ minSyncUs: "four" }, "minSyncUs"],
    [{ minSyncUs: "-1" }, "minSyncUs"],
    [{ syncMinV: "0.2", syncMaxV: "" }, "syncMaxV"],
    [{ syncMinV: "0.6", syncMaxV: "0.2" }, "syncMinV"],
    [{ hiddenTopPct: "90" }, "hiddenTopPct"],
    [{ bands: [emptyBand] }, "bands.0.lineMinKhz"],
    [{ bands: [{ lineMinKhz: "16", lineMaxKhz: "15", fieldMinHz: "48", fieldMaxHz: "62" }] }, "bands.0.lineMinKhz"],
    [{ bands: [{ lineMinKhz: "15", lineMaxKhz: "16", fieldMinHz: "", fieldMaxHz: "" }] }, "bands.0.fieldMinHz"],
  ])("names the field of %j", (change, field) => {
    const read = envelopeFromForm({ ...form(), ...change });
    expect(read.ok ? [] : read.error.map(({ path }) => path)).toContain(field);
  });
});
