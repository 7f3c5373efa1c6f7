import { describe, expect, it } from "vitest";
import { entryWords, standardRows } from "@/components/standards/standard-rows";
import { readStandards, togglePick, writeStandards } from "@/components/standards/standards-address";
import type { StandardsState } from "@/components/standards/standards-address";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { screenPresets } from "@/lib/timing/screen-presets";

const atFirst = readStandards(new URLSearchParams());
const full: StandardsState = {
  text: "1440 px & more",
  lines: "240",
  rate: "59,94",
  document: "cta",
  screen: "bt470-525",
  fitting: true,
  order: { id: "sync", desc: true },
  picked: ["cta-861-8", "cta-861-23-313"],
  comparing: true,
  laid: "over",
};

describe("the address of Standards", () => {
  it("is empty as the page is at first", () => {
    expect(writeStandards(atFirst).toString()).toBe("");
  });

  it.each([
    ["all of it", full],
    ["no screen, by choice", { ...atFirst, screen: "" }],
    ["one picked, nothing compared", { ...atFirst, picked: ["vesa-dmt-04"] }],
  ])("gives the page back: %s", (_, state) => {
    expect(readStandards(new URLSearchParams(writeStandards(state).toString()))).toEqual(state);
  });

  it("falls back where it says what there is not", () => {
    const wrong = new URLSearchParams({
      document: "toString",
      order: "-nothing",
      compare: "true",
      laid: "sideways",
      pick: "a,b,c",
      q: "x".repeat(10_000),
    });
    const state = readStandards(wrong);
    expect(state).toMatchObject({
      document: "",
      order: { id: "line", desc: false },
      laid: "under",
      picked: ["a", "b"],
    });
    expect(state.text).toHaveLength(100);
    expect(readStandards(new URLSearchParams({ compare: "true", pick: "a" })).comparing).toBe(false);
  });
});

describe("what is compared", () => {
  it("is two: a third takes the place of the first, a second tick takes one out", () => {
    const two = togglePick(togglePick([], "a"), "b");
    expect(two).toEqual(["a", "b"]);
    expect(togglePick(two, "c")).toEqual(["b", "c"]);
    expect(togglePick(two, "a")).toEqual(["b"]);
  });
});

describe("the list of Standards", () => {
  it("calls no two rasters the same", () => {
    expect(new Set(catalogue.map(entryWords)).size).toBe(catalogue.length);
  });

  it("holds every raster while nothing is asked for, and keeps those of a document", () => {
    expect(standardRows(atFirst, null)).toHaveLength(catalogue.length);
    const dmt = standardRows({ ...atFirst, document: "dmt" }, null);
    expect(new Set(dmt.map((row) => row.document))).toEqual(new Set(["VESA DMT"]));
  });

  // CTA-861: code 8 has 240 lines at 15 734 Hz, codes 2 and 3 have 480 at 31 469 Hz.
  it("says what a screen takes, and leaves the rest out when asked to", () => {
    const television = screenPresets.find(({ id }) => id === "bt470-525")?.envelope ?? null;
    const lines = { ...atFirst, text: "cta-861", rate: "60" };
    const rows = new Map(standardRows(lines, television).map((row) => [row.id, row.fit]));
    expect(rows.get("cta-861-8")).toMatchObject({ fits: true, short: "" });
    expect(rows.get("cta-861-2")).toMatchObject({ fits: false, short: "line rate above" });
    const fitting = standardRows({ ...lines, fitting: true }, television).map((row) => row.id);
    expect(fitting).toContain("cta-861-8");
    expect(fitting).not.toContain("cta-861-2");
  });
});
