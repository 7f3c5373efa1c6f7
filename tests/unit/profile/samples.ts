import fc from "fast-check";
import type { ProfileDocument, ProfileSlot } from "@/lib/profile/document";
import type { DeviceLimits, NumberLimit } from "@/lib/profile/limits";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { deviceLimits } from "@/lib/serial/limits";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { screenPresets } from "@/lib/timing/screen-presets";
import { standardNames, standardRaster, type StandardName } from "@/lib/timing/standards";

/** The limits that the shipped LF-8 driver gives. */
export const lf8: DeviceLimits = deviceLimits(lanternfieldLf8, "3.2");

export const timingOf = (name: StandardName): RasterTiming => standardRaster(name).timing;

export const television: ScreenEnvelope = preset("bt470-525");
export const bothTelevision: ScreenEnvelope = preset("bt470-both");
export const monitor: ScreenEnvelope = preset("vic1-31k");

function preset(id: string): ScreenEnvelope {
  const found = screenPresets.find((one) => one.id === id);
  if (!found) throw new Error(`no preset ${id}`);
  return found.envelope;
}

export function documentOf(parts: Partial<ProfileDocument>): ProfileDocument {
  return { format: "backporch-profile", version: 1, ...parts };
}

/** A profile of one slot that shows 240 lines, and what is changed in it. */
export function oneSlot(slot: Partial<ProfileSlot>, timing: RasterTiming = timingOf("240p60")): ProfileDocument {
  return documentOf({ modes: [{ key: "a", timing }], slots: [{ number: 1, mode: "a", ...slot }] });
}

const stepped = (limit: NumberLimit) =>
  fc
    .integer({ min: 0, max: Math.floor((limit.max - limit.min) / limit.step) })
    .map((n) => Number((limit.min + n * limit.step).toPrecision(12)));
const limitOf = (pattern: string) => {
  const limit = lf8.numbers[pattern];
  if (!limit) throw new Error(`no limit ${pattern}`);
  return limit;
};
const maybe = <T>(value: fc.Arbitrary<T>) => fc.option(value, { nil: undefined });
const named = <T extends object>(value: T): T =>
  Object.fromEntries(Object.entries(value).filter(([, inner]) => inner !== undefined)) as T;

export const anyTiming = fc
  .record({
    name: fc.constantFrom(...standardNames),
    hPorch: fc.integer({ min: -6, max: 6 }),
    vPorch: fc.integer({ min: -2, max: 2 }),
  })
  .map(({ name, hPorch, vPorch }): RasterTiming => {
    const timing = timingOf(name);
    const { horizontal, vertical } = timing;
    return {
      ...timing,
      horizontal: {
        ...horizontal,
        frontPorch: horizontal.frontPorch + hPorch,
        backPorch: horizontal.backPorch - hPorch,
      },
      vertical: { ...vertical, frontPorch: Math.max(1, vertical.frontPorch + vPorch) },
    };
  });

const anyPlacement = fc
  .record({
    widthPct: maybe(stepped(limitOf("slots[*].placement.widthPct"))),
    heightPct: maybe(stepped(limitOf("slots[*].placement.heightPct"))),
    offsetPx: maybe(stepped(limitOf("slots[*].placement.offsetPx"))),
    offsetLines: maybe(stepped(limitOf("slots[*].placement.offsetLines"))),
  })
  .map(named);
const anyTrim = fc
  .record({ leftPx: maybe(fc.integer({ min: -32, max: 255 })), topLines: maybe(fc.integer({ min: -16, max: 120 })) })
  .map(named);
const anyName = fc.string({ unit: "grapheme-ascii", maxLength: 16 });

/** A slot that may name anything, and points to one of `keys` or nowhere. */
const anySlot = (number: number, keys: readonly string[]) =>
  fc
    .record({
      number: fc.constant(number),
      name: maybe(anyName),
      mode: keys.length === 0 ? fc.constant(undefined) : maybe(fc.constantFrom(...keys)),
      placement: maybe(anyPlacement),
      syncKind: maybe(fc.constantFrom("separate" as const, "composite" as const)),
      lineFilter: maybe(fc.constantFrom("nearest" as const, "area" as const)),
    })
    .map(named);

const slotsOf = (keys: readonly string[], numbers: readonly number[]) =>
  fc.tuple(...numbers.map((number) => anySlot(number, keys)));

const documentWith = (keys: readonly string[], numbers: readonly number[]) =>
  fc
    .record({
      timings: fc.tuple(...keys.map(() => anyTiming)),
      names: fc.tuple(...keys.map(() => maybe(anyName))),
      slots: slotsOf(keys, numbers),
      trim: maybe(anyTrim),
    })
    .map(({ timings, names, slots, trim }) =>
      documentOf({
        ...(trim && { everywhere: { trim } }),
        modes: keys.map((key, index) => named({ key, name: names[index], timing: timings[index] })),
        slots: [...slots],
      }),
    );

/** A backup's document: modes under the device's numbers. */
export const anyBase: fc.Arbitrary<ProfileDocument> = fc
  .subarray(["1", "2", "3", "4", "7", "32"], { minLength: 1 })
  .chain((keys) => documentWith(keys, [1, 2, 3, 4, 5, 6, 7, 8]));

/** A profile: keys of its own, some of which look like the device's. */
export const anyProfile: fc.Arbitrary<ProfileDocument> = fc
  .tuple(fc.subarray(["a", "b", "2", "wide ]\\ one", "3"]), fc.subarray([1, 2, 3, 5, 8]))
  .chain(([keys, numbers]) => documentWith(keys, numbers));
