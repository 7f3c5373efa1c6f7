import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { checkRecall } from "@/lib/profile/check/check-recall";
import { profileDocumentSchema, screenEnvelopeSchema, type ProfileDocument } from "@/lib/profile/document";
import type { DeviceLimits } from "@/lib/profile/limits";
import { overlay } from "@/lib/profile/overlay";
import { safeStretch } from "@/lib/profile/safe-stretch";
import { compareDocuments } from "@/lib/profile/compare";
import { lf8 } from "@/tests/unit/profile/samples";

/** Numbers that a stranger's document may hold: the schema takes every finite one. */
const number = fc.oneof(
  fc.constantFrom(0, -0, 1, -1, 0.5, 1e-300, -1e-9, 1e21, 1e300, -1e300, 27e6, 15_734.266, 60, 100, 240),
  fc.double({ noNaN: true, noDefaultInfinity: true }),
);
const whole = fc.oneof(
  fc.constantFrom(0, -1, 1, 4, 240, 720, 65_535, 65_536, Number.MAX_SAFE_INTEGER, Number.MIN_SAFE_INTEGER),
  fc.maxSafeInteger(),
);
const maybe = <T>(value: fc.Arbitrary<T>) => fc.option(value, { nil: undefined });
const axis = fc.record({
  active: whole,
  frontPorch: whole,
  sync: whole,
  backPorch: whole,
  polarity: fc.constantFrom("positive" as const, "negative" as const),
});
const timing = fc.record({
  pixelClockHz: number,
  interlaced: fc.boolean(),
  equalFields: maybe(fc.boolean()),
  horizontal: axis,
  vertical: axis,
});
const key = fc.constantFrom("a", "1", "2", "]", "\\].x");
const slot = fc.record({
  number: fc.constantFrom(0, 1, 2, 9, 255),
  mode: maybe(key),
  name: maybe(fc.string({ unit: fc.constantFrom("a", "é", "€", " ") })),
  placement: maybe(
    fc.record({ widthPct: maybe(number), heightPct: maybe(number), offsetPx: maybe(whole), offsetLines: maybe(whole) }),
  ),
  expects: maybe(fc.record({ activePx: whole, activeLines: whole, interlaced: fc.boolean(), fieldRateHz: number })),
  syncKind: maybe(fc.constantFrom("separate" as const, "onLuma" as const)),
  input: maybe(fc.constantFrom("digital-1", "nowhere")),
});
const span = fc.tuple(number, number);
const screen = fc
  .record({
    name: fc.constant("s"),
    bands: fc.array(fc.record({ lineRateHz: span, fieldRateHz: span }), { maxLength: 3 }),
    interlace: maybe(fc.boolean()),
    syncVpp: maybe(span),
    minSyncUs: maybe(number.filter((value) => value >= 0)),
    minFieldBlankUs: maybe(number.filter((value) => value >= 0)),
    aspect: maybe(fc.constantFrom("0:0", "4:3", "0:3", "3:0")),
    visiblePct: maybe(fc.record({ left: number, right: number, top: number, bottom: number })),
  })
  .map((value) => screenEnvelopeSchema.parse(value));
const document: fc.Arbitrary<ProfileDocument> = fc
  .record({
    everywhere: maybe(
      fc.record({
        trim: maybe(fc.record({ leftPx: maybe(whole), topLines: maybe(whole) })),
        powerOnSlot: maybe(whole),
      }),
    ),
    madeFor: maybe(fc.record({ screen })),
    modes: fc.array(fc.record({ key, timing: maybe(timing) }), { maxLength: 4 }),
    slots: fc.array(slot, { maxLength: 4 }),
  })
  .map((parts) => profileDocumentSchema.parse({ format: "backporch-profile", version: 1, ...parts }));
const device: fc.Arbitrary<DeviceLimits> = fc
  .record({
    min: number.filter((value) => Math.abs(value) <= 1e300),
    size: fc.double({ min: 0, max: 1e300, noNaN: true }),
    step: fc.constantFrom(1e-12, 0.4, 1, 1e6, 1e290),
    outsideRaster: fc.constantFrom("refuses" as const, "cuts" as const),
    outputClock: fc.constantFrom("free" as const, "input" as const),
  })
  .map(({ min, size, step, ...rest }) => {
    const limit = { min, max: min + size, step };
    return { ...lf8, ...rest, numbers: Object.fromEntries(Object.keys(lf8.numbers).map((name) => [name, limit])) };
  });

describe("documents, screens and limits from strangers", () => {
  it("are checked without a throw, in sentences with figures", () => {
    fc.assert(
      fc.property(document, maybe(device), maybe(screen), (of, limits, on) => {
        for (const finding of checkProfile({ document: of, device: limits, screen: on })) {
          expect(
            `${finding.sentence} ${finding.detail ?? ""} ${finding.remedies.map(({ label }) => label).join()}`,
          ).not.toMatch(/NaN|undefined|null|Infinity/u);
        }
      }),
      { numRuns: 300 },
    );
  });

  it("are overlaid, compared, recalled and measured out without a throw", () => {
    fc.assert(
      fc.property(document, document, device, maybe(screen), (base, profile, limits, on) => {
        const { merged } = overlay({ base, profile, leftOut: [1], limits });
        compareDocuments(base, merged);
        checkRecall({ document: merged, slot: 2, device: limits, screen: on, nothingArrives: true });
        for (const path of [
          "slots[2].placement.heightPct",
          "slots[1].placement.offsetPx",
          "modes[a].timing.pixelClockHz",
          "modes[1].timing.vertical.backPorch",
          "everywhere.trim.leftPx",
        ]) {
          const stretch = safeStretch(path, { document: merged, device: limits, screen: on });
          if (stretch) expect(stretch[0]).toBeLessThanOrEqual(stretch[1]);
        }
      }),
      { numRuns: 200 },
    );
  });
});
