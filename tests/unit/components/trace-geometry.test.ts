import { describe, expect, it } from "vitest";
import { fieldTrace, lineTrace, tracePath, traceScale, traceSpan } from "@/components/video/trace-geometry";
import { publishedVics, rasterOf } from "@/tests/fixtures/standards/read";

describe("traces over time", () => {
  // hfreq_khz and vfreq_hz of vic.json, as edid-decode prints them.
  it.each(publishedVics())("code %i: a line and a field last as long as its published rates say", (_, published) => {
    const timing = rasterOf(published);
    const [line, field] = [lineTrace(timing), fieldTrace(timing)];
    expect((line.endsAt - line.beginsAt) * published.hfreq_khz).toBeCloseTo(1000, 1);
    expect((field.endsAt - field.beginsAt) * published.vfreq_hz).toBeCloseTo(1000, 1);
  });

  it("stand on one scale, each from the start of its sync", () => {
    const [short, long] = publishedVics()
      .filter(([code]) => code === 8 || code === 23)
      .map(([, published]) => lineTrace(rasterOf(published)));
    if (short === undefined || long === undefined) throw new Error("codes 8 and 23");
    const span = traceSpan([short, long]);
    // Code 8 has the longer front porch (38 clocks of 27 MHz against 24), code 23 the longer line.
    expect(span[0]).toBeCloseTo(-38 / 27, 6);
    expect(span[1]).toBeCloseTo(64 - 24 / 27, 6);
    const x = traceScale(span, 1000);
    const levels = { whitePx: 8, blackPx: 44, syncPx: 66 };
    for (const trace of [short, long]) expect(tracePath(trace, x, levels)).toContain(`H${x(0)}V66`);
    expect(tracePath(short, x, levels).startsWith("M0 44")).toBe(true);
    expect(tracePath(long, x, levels).endsWith("V44H1000")).toBe(true);
  });
});
