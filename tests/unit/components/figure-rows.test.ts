import { describe, expect, it } from "vitest";
import { differCount, figureRows } from "@/components/standards/figure-rows";
import { publishedVics, rasterOf } from "@/tests/fixtures/standards/read";

const vics = new Map(publishedVics());
const vic = (code: number) => {
  const published = vics.get(code);
  if (published === undefined) throw new Error(`code ${code}`);
  return rasterOf(published);
};
const rowsOf = (left: number, right: number) =>
  new Map(figureRows(vic(left), vic(right)).map((row) => [row.figure, row]));

describe("two rasters side by side", () => {
  // vic.json: code 8 is 27 MHz / 1716 / 262, code 23 is 27 MHz / 1728 / 312; sync 124 and 126 clocks.
  it("states each figure with its unit, and the time that counts take", () => {
    const rows = rowsOf(8, 23);
    expect(rows.get("Line in all")).toMatchObject({
      left: "1\u2009716\u00A0clocks, 63.56\u00A0µs",
      right: "1\u2009728\u00A0clocks, 64.00\u00A0µs",
      difference: "+12\u00A0clocks",
    });
    expect(rows.get("Line sync")).toMatchObject({ left: "124\u00A0clocks, 4.59\u00A0µs", same: false });
    expect(rows.get("Field rate")).toMatchObject({ left: "60.054\u00A0Hz", right: "50.080\u00A0Hz" });
    expect(rows.get("Pixel clock")).toMatchObject({ left: "27.000\u00A0MHz", same: true, difference: "" });
  });

  // Code 6 is the interlaced pair of code 8: the same line, an odd line in the frame.
  it("marks what differs and nothing else", () => {
    const rows = rowsOf(8, 6);
    const differing = [...rows.values()].filter((row) => !row.same).map((row) => row.figure);
    expect(differing).toEqual(["Field rate", "Scan"]);
    expect(differCount([...rows.values()])).toBe("2 of 16 figures differ");
    expect(differCount(figureRows(vic(8), vic(8)))).toBe("No figure differs");
  });
});
