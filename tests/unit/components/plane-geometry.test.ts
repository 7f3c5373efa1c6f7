import { describe, expect, it } from "vitest";
import { nearBands, planeDomain, planeTicks, rayLabels, raySegment, xOf, yOf } from "@/components/video/plane-geometry";

const band = { lineRateHz: [15_450, 15_890], fieldRateHz: [48, 62] } as const;
// CTA-861 code 8.
const point = { lineRateHz: 15_734.266, fieldRateHz: 60.054 };
const frame = { leftPx: 30, topPx: 5, widthPx: 400, heightPx: 300 };

describe("rate plane", () => {
  it("shows every band and every point whole", () => {
    const domain = planeDomain([band], [point, { lineRateHz: 17_400, fieldRateHz: 60 }]);
    expect(domain?.lineRateHz[0]).toBeLessThan(15_450);
    expect(domain?.lineRateHz[1]).toBeGreaterThan(17_400);
    expect(domain?.fieldRateHz[0]).toBeLessThan(48);
    expect(domain?.fieldRateHz[1]).toBeGreaterThan(62);
  });

  it("has nothing to show without rates", () => {
    expect(planeDomain([], [])).toBeUndefined();
  });

  it("puts a higher field rate higher and a higher line rate further right", () => {
    const domain = planeDomain([band], [point]);
    if (domain === undefined) throw new Error("no domain");
    expect(yOf(62, domain, frame)).toBeLessThan(yOf(48, domain, frame));
    expect(xOf(15_890, domain, frame)).toBeGreaterThan(xOf(15_450, domain, frame));
  });

  it("draws the ray of a line count through its rasters", () => {
    const domain = { lineRateHz: [15_000, 16_000], fieldRateHz: [50, 65] } as const;
    const ray = raySegment(262, domain);
    expect(ray?.from).toEqual({ lineRateHz: 15_000, fieldRateHz: 15_000 / 262 });
    expect(ray?.to.fieldRateHz).toBeCloseTo(16_000 / 262, 9);
    expect(raySegment(525, domain)).toBeUndefined();
  });

  it("ticks on round values within the view", () => {
    expect(planeTicks([15_300, 17_800], 6)).toEqual([15_500, 16_000, 16_500, 17_000, 17_500]);
    expect(planeTicks([46.5, 63.4], 6)).toEqual([50, 55, 60]);
  });

  it("lets no two names of rays stand on each other, and none outside the plane", () => {
    const domain = { lineRateHz: [14_000, 18_000], fieldRateHz: [45, 65] } as const;
    const rays = [262, 264, 266, 290, 312, 525].map((lines) => raySegment(lines, domain));
    const labels = rayLabels(rays, domain, frame).filter((label) => label !== undefined);
    labels.forEach((label, index) => {
      expect(label.x - 62).toBeGreaterThanOrEqual(frame.leftPx);
      expect(label.y).toBeGreaterThanOrEqual(frame.topPx);
      labels
        .slice(index + 1)
        .forEach((other) => expect(Math.abs(other.x - label.x) >= 62 || Math.abs(other.y - label.y) >= 13).toBe(true));
    });
    expect(labels.length).toBeGreaterThanOrEqual(4);
    expect(rayLabels(rays, domain, frame).at(-1)).toBeUndefined();
  });

  it("leaves rasters of other kinds of screens out", () => {
    expect(nearBands([point, { lineRateHz: 31_469, fieldRateHz: 59.94 }], [band])).toEqual([point]);
  });
});
