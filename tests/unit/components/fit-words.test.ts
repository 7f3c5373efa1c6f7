import { describe, expect, it } from "vitest";
import { fitOf } from "@/components/screens/fit-words";
import { screenPresets } from "@/lib/timing/screen-presets";
import { standardRaster } from "@/lib/timing/standards";

const preset = (id: string) => {
  const found = screenPresets.find((each) => each.id === id);
  if (found === undefined) throw new Error(id);
  return found.envelope;
};

describe("what a screen takes, in words", () => {
  // BT.470-5 525/60 is 15 734 Hz; CTA-861 code 8 is 240 lines at that rate, code 2 is 31 469 Hz.
  it("takes 240p60 on a 525-line set", () => {
    expect(fitOf(standardRaster("240p60").timing, preset("bt470-525"))).toEqual({ fits: true, words: "" });
  });

  it("says where the band ends", () => {
    const fit = fitOf(standardRaster("480p60").timing, preset("bt470-525"));
    expect(fit.fits).toBe(false);
    expect(fit.words).toContain("line rate 31.469\u00A0kHz, this screen ends at 15.892\u00A0kHz");
  });

  it("says that a progressive monitor takes no interlace", () => {
    expect(fitOf(standardRaster("480i60").timing, preset("vic1-31k")).words).toContain("takes no interlace");
  });

  it("is no fit where no band is known", () => {
    expect(fitOf(standardRaster("240p60").timing, { name: "Unknown set", bands: [] }).fits).toBe(false);
  });
});
