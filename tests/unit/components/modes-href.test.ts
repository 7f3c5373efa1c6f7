import { describe, expect, it } from "vitest";
import { fromQuery } from "@/components/modes/store/link";
import { modesHref } from "@/components/standards/modes-href";
import { screenPresets } from "@/lib/timing/screen-presets";
import { publishedVics, rasterOf } from "@/tests/fixtures/standards/read";

describe("the way from Standards to Modes", () => {
  const [television] = screenPresets;
  if (television === undefined) throw new Error("no presets");

  // Rasters of vic.json: CTA-861 codes 1 to 38 as edid-decode prints them.
  it.each(publishedVics())("code %i arrives as it is, with its screen", (_, published) => {
    const timing = rasterOf(published);
    const href = modesHref(timing, { value: television.id, envelope: television.envelope });
    const query = Object.fromEntries(new URLSearchParams(href.slice(href.indexOf("?"))));
    const read = fromQuery(query);
    expect(read.problems).toEqual([]);
    expect(read.choices).toMatchObject({ raster: timing, byHand: true, screen: { id: television.id } });
  });
});
