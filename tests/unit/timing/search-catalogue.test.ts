import { describe, expect, it } from "vitest";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { catalogueEntry, compareRasters, searchCatalogue } from "@/lib/timing/catalogue/search-catalogue";
import { standardRaster } from "@/lib/timing/standards";

const ids = (query: Parameters<typeof searchCatalogue>[0]) => searchCatalogue(query).map(({ id }) => id);

describe("searchCatalogue", () => {
  it("gives everything for an empty query, in order", () => {
    expect(ids({})).toEqual(catalogue.map(({ id }) => id));
  });

  it("finds lines of a frame and of a field, at a rate", () => {
    expect(ids({ lines: 288, rateHz: 50 })).toEqual(
      expect.arrayContaining(["cta-861-23", "cta-861-23-314", "cta-861-21"]),
    );
    expect(
      searchCatalogue({ lines: 240, rateHz: 60 }).every(({ fieldRateHz }) => Math.abs(fieldRateHz - 60) <= 0.5),
    ).toBe(true);
    expect(ids({ lines: 240 })).not.toContain("cta-861-23");
  });

  it("finds words of the document, the code and the note", () => {
    expect(ids({ text: "vic 8" })).toContain("cta-861-8");
    expect(ids({ text: "DMT 0x0f" })).toEqual(["vesa-dmt-0f"]);
    expect(ids({ text: "bt.601 625/50" })).toEqual(["bt601-625"]);
    expect(ids({ text: "no such raster" })).toEqual([]);
  });

  it("gives an entry by id", () => {
    expect(catalogueEntry("cta-861-8")?.timing).toEqual(standardRaster("240p60").timing);
    expect(catalogueEntry("none")).toBeUndefined();
  });
});

describe("compareRasters", () => {
  it("tells which figures of two rasters differ", () => {
    const rows = compareRasters(standardRaster("240p60").timing, standardRaster("480i60").timing);
    const differing = rows.filter(({ same }) => !same).map(({ figure }) => figure);
    expect(differing).toEqual(["fieldRateHz", "scan"]);
    expect(rows.find(({ figure }) => figure === "lineTotal")).toMatchObject({
      left: 1716,
      right: 1716,
      unit: "clocks",
    });
  });
});
