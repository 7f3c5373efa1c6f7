import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fitFindings } from "@/lib/profile/fit-findings";
import type { FitRequest } from "@/lib/timing/fit/fit-types";
import { anyRequest, outcome, television, wish240 } from "@/tests/unit/timing/fit/requests";

const plain = (text: string | undefined) => text?.replaceAll(/[\u00A0\u2009]/gu, " ");
const findingsOf = (request: FitRequest) => fitFindings(request, outcome(request));

describe("why nothing fits, as findings", () => {
  it("state the fact, the limit and the way out", () => {
    // By hand: 270 + 20 = 290; 290 · 60 = 17 400; 15 892 / 290 = 54.80; ⌊15 892 / 60⌋ − 20 = 244.
    const request = { wish: { ...wish240, activeLines: 270 }, screen: television };
    const [finding, ...others] = findingsOf(request);
    expect(others).toEqual([]);
    expect(finding).toMatchObject({
      rule: "screen.line-rate",
      path: "screen.bands",
      severity: "stop",
      measured: 17_400,
      limit: 15_892,
      unit: "Hz",
      limitSource: "screen",
    });
    expect(plain(finding?.sentence)).toBe(
      "270 lines need 290 in all with 20 of blanking; at 60 Hz that is 17.4 kHz and this screen ends at 15.892 kHz; " +
        "at its fastest they run at 54.8 Hz; at 60 Hz 244 lines fit.",
    );
  });

  it("say where a limit comes from", () => {
    const sources = { bands: "service-literature" } as const;
    const [screen] = findingsOf({ wish: { ...wish240, activeLines: 270 }, screen: { ...television, sources } });
    expect(screen?.limitSource).toBe("service literature");
    const device = { clockHz: { min: 5e6, max: 30e6, step: 1000 } };
    const [clock] = findingsOf({ wish: { ...wish240, activePx: 1920 }, screen: television, device });
    expect(clock).toMatchObject({ rule: "device.clock", path: "device.clockHz", limitSource: "driver" });
    expect(plain(clock?.sentence)).toMatch(/this device ends at 30 MHz; the nearest that fits has [\d ]+ px\.$/u);
    const [kept] = findingsOf({ wish: { ...wish240, lineTotal: 10_000 }, screen: television, device });
    expect(kept).toMatchObject({ severity: "stop" });
  });

  it("say nothing where something fits", () => {
    expect(findingsOf({ wish: wish240, screen: television })).toEqual([]);
  });

  it("name a rule, a member of the request and a whole sentence for every constraint there is", () => {
    const seen = new Set<string>();
    fc.assert(
      fc.property(anyRequest, (request) => {
        const { blockedBy } = outcome(request);
        const findings = findingsOf(request);
        expect(findings).toHaveLength(blockedBy.length);
        for (const finding of findings) {
          seen.add(finding.rule);
          expect(finding.rule).toMatch(/^(screen|blanking|device|wish)\.[a-z-]+$/u);
          expect(finding.sentence).toMatch(/^[A-Z0-9].*[^.;]\.$/u);
          expect(finding.sentence).not.toMatch(/NaN|Infinity|undefined/u);
        }
      }),
      { numRuns: 30 },
    );
    expect(seen.size).toBeGreaterThan(3);
  }, 120_000);
});
