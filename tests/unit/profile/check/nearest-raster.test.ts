import { describe, expect, it } from "vitest";
import { checkProfile } from "@/lib/profile/check/check-profile";
import type { CheckInput } from "@/lib/profile/check/context";
import type { Finding, Remedy } from "@/lib/profile/finding";
import { applyPatch } from "@/lib/profile/paths";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { screenPresets } from "@/lib/timing/screen-presets";
import { documentOf, lf8, oneSlot, television, timingOf } from "@/tests/unit/profile/samples";
import { theOne } from "./find";

const devices = [undefined, ...shippedDrivers.map((driver) => deviceLimits(driver))];
const stopsOf = (input: CheckInput) => checkProfile(input).filter(({ severity }) => severity === "stop");
const isRaster = ({ kind, label }: Remedy) => kind === "set" && label.startsWith("Make mode ");
const rasterOf = (finding: Finding | undefined) => finding?.remedies.find(isRaster);
const key = ({ rule, path }: Finding) => `${rule} ${path}`;

/** The document after a click on a remedy. */
function after(input: CheckInput, remedy: Remedy): CheckInput {
  if (remedy.kind !== "set") throw new Error(remedy.label);
  return { ...input, document: applyPatch(input.document, remedy.patch) };
}

describe("the nearest raster", () => {
  it("is named and makes the finding pass by one click, with no new stop, on every screen and device", () => {
    let offered = 0;
    let asked = 0;
    // Every nineteenth published raster that a screen does not take.
    for (const { envelope: screen } of screenPresets) {
      for (const { timing } of catalogue.filter(
        (entry, index) => index % 19 === 0 && !fitsEnvelope(entry.timing, screen),
      )) {
        for (const device of devices) {
          const source = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
          const document = oneSlot({ placement: { widthPct: 100, heightPct: 100 } }, timing);
          const input: CheckInput = { document, device, screen, source };
          const before = stopsOf(input);
          const known = new Set(before.map(key));
          for (const finding of before.filter(({ rule }) => /^(screen|blanking)\./u.test(rule))) {
            asked += 1;
            const remedy = rasterOf(finding);
            if (remedy === undefined) continue;
            offered += 1;
            expect(finding.detail).toContain("Nearest raster that fits: ");
            const left = stopsOf(after(input, remedy)).map(key);
            expect(left).not.toContain(key(finding));
            expect(left.filter((one) => !known.has(one))).toEqual([]);
          }
        }
      }
    }
    expect(asked).toBeGreaterThan(80);
    // Nearly always there is one; a source of 60 Hz on a device that follows it has no 50 Hz screen.
    expect(offered / asked).toBeGreaterThan(0.7);
  }, 120_000);

  it("keeps lines, width and rate where a raster of them fits", () => {
    const timing = timingOf("240p60");
    const fast = { ...timing, pixelClockHz: timing.pixelClockHz * 1.02 };
    const finding = theOne("screen.line-rate", { document: oneSlot({}, fast), device: lf8, screen: television });
    const remedy = rasterOf(finding);
    if (remedy?.kind !== "set") throw new Error("no raster");
    const values = new Map(remedy.patch.map(({ path, value }) => [path, value]));
    expect(values.get("modes[a].timing.horizontal.active")).toBe(1440);
    expect(values.get("modes[a].timing.vertical.active")).toBe(240);
    expect(values.get("modes[a].timing.interlaced")).toBe(false);
  });

  it("offers 480 lines interlaced where 480 progressive lines are too fast", () => {
    const finding = theOne("screen.line-rate", {
      document: oneSlot({}, timingOf("480p60")),
      device: lf8,
      screen: television,
    });
    expect(finding.detail).toMatch(/Nearest raster that fits: 480i60 \(15\.\d{3} kHz, (59|60)\.\d{3} Hz\)\.$/u);
    expect(rasterOf(finding)?.label).toMatch(/^Make mode a 480i60 at 15\.\d{3} kHz$/u);
  });

  it("gives a mode without a sync one that it can lock to", () => {
    const timing = timingOf("240p60");
    const { sync, backPorch } = timing.horizontal;
    const without = { ...timing, horizontal: { ...timing.horizontal, sync: 0, backPorch: backPorch + sync } };
    const input = { document: oneSlot({}, without), screen: television };
    const remedy = rasterOf(theOne("blanking.absent", input));
    if (remedy === undefined) throw new Error("no raster");
    expect(stopsOf(after(input, remedy))).toEqual([]);
  });

  it("does not move a mode that a slot which stays shows too", () => {
    const document = documentOf({
      modes: [{ key: "a", timing: timingOf("480p60") }],
      slots: [
        { number: 1, mode: "a" },
        { number: 2, mode: "a" },
      ],
    });
    const finding = theOne("screen.line-rate", { document, screen: television, unchanged: { slots: [2], modes: [] } });
    expect(finding.detail).toContain("Nearest raster that fits");
    expect(rasterOf(finding)).toBeUndefined();
  });

  it("keeps a placement inside the raster that it was inside before", () => {
    const document = oneSlot({ placement: { widthPct: 100, heightPct: 90, offsetLines: 24 } }, timingOf("480p60"));
    const input = { document, device: lf8, screen: television };
    const [stop] = stopsOf(input);
    const remedy = rasterOf(stop);
    // 90 % of 240 field lines is 216, and 24 lower than the middle they end at 252: the interlaced raster is too low.
    expect(stop?.rule).toBe("screen.line-rate");
    expect(remedy?.label ?? "").not.toContain("480i60");
    expect(remedy === undefined ? [] : stopsOf(after(input, remedy))).toEqual([]);
  });

  it("is searched for the first four modes that do not fit, however many there are", () => {
    const modes = Array.from({ length: 24 }, (_, index) => ({ key: `m${index}`, timing: timingOf("480p60") }));
    const slots = modes.map(({ key: mode }, number) => ({ number, mode }));
    const stops = stopsOf({ document: documentOf({ modes, slots }), screen: television }).filter(
      ({ rule }) => rule === "screen.line-rate",
    );
    expect(stops).toHaveLength(24);
    expect(stops.filter((finding) => rasterOf(finding) !== undefined)).toHaveLength(4);
  });
});
