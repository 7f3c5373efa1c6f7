import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { profileDocumentSchema } from "@/lib/profile/document";
import { documentFromNative, nativeFromDocument } from "@/lib/serial/backup/document";
import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import { toNative, toNeutral } from "@/lib/serial/driver/neutral";
import type { NativeValue, NativeValues } from "@/lib/serial/native";
import { lf8 } from "@/tests/unit/serial/simulated-rig";

const factory: NativeValues = Object.fromEntries(lf8.settings.map((setting) => [setting.key, setting.initial]));

function anyValue({ value }: CompiledSetting): fc.Arbitrary<NativeValue> {
  if (value.type === "integer") return fc.integer({ min: 0, max: Math.floor((value.max - value.min) / value.step) }).map((steps) => value.min + steps * value.step);
  if (value.type === "choice") return fc.constantFrom(...value.choices.map((choice) => choice.native));
  return fc.array(fc.constantFrom(...value.characters), { maxLength: value.maxLength }).map((characters) => characters.join(""));
}

const anyDevice = fc.record(Object.fromEntries(lf8.settings.map((setting) => [setting.key, anyValue(setting)])));

describe("the neutral document of a device", () => {
  it("goes back to the device's own values exactly, whatever they are", () => {
    fc.assert(
      fc.property(anyDevice, (values) => {
        const document = documentFromNative(lf8, values);
        expect(nativeFromDocument(lf8, document, values)).toEqual(values);
      }),
      { numRuns: 25 },
    );
  });

  it("is a profile document with the device's numbers as mode keys and nothing native in it", () => {
    const document = documentFromNative(lf8, factory);
    expect(profileDocumentSchema.parse(document)).toEqual(document);
    expect(document.modes?.map((mode) => mode.key)).toEqual(Array.from({ length: 32 }, (_, index) => String(index + 1)));
    expect(document.modes?.every((mode) => mode.timing !== undefined)).toBe(true);
    expect(JSON.stringify(document)).not.toContain("native");
    expect(document.slots?.[0]).toMatchObject({ number: 1, name: "240 lines 60 Hz", mode: "1", syncKind: "composite", placement: { widthPct: 96, heightPct: 96, offsetPx: 0, offsetLines: 0 } });
  });

  it("says that a slot is empty by giving it no mode, and blank names by giving none", () => {
    const [, , , , , sixth] = documentFromNative(lf8, factory).slots ?? [];
    expect(sixth?.number).toBe(6);
    expect(sixth).not.toHaveProperty("mode");
    expect(sixth).not.toHaveProperty("name");
  });

  it("leaves out what was not read, and a timing with a hole as a whole", () => {
    const { "modes[2].timing.horizontal.sync": _sync, "slots[1].syncKind": _kind, ...rest } = factory;
    const document = documentFromNative(lf8, rest);
    expect(document.modes?.[1]).not.toHaveProperty("timing");
    expect(document.modes?.[0]).toHaveProperty("timing");
    expect(document.slots?.[0]).not.toHaveProperty("syncKind");
  });

  it("keeps what a document does not name, or names in a word the device lacks", () => {
    const values = nativeFromDocument(lf8, { format: "backporch-profile", version: 1, slots: [{ number: 2, placement: { heightPct: 97.6 }, input: "antenna" }] }, factory);
    expect(values).toEqual({ ...factory, "slots[2].placement.heightPct": 976 });
  });

  // By hand: 0.4 % steps from 80 %: 95.1 lies between 94.8 and 95.2; 95.0 is a tie and goes up.
  it("goes to the nearest step, ties up", () => {
    const height = lf8.byKey.get("slots[1].placement.heightPct")?.value;
    if (!height) throw new Error("no height");
    expect([95.1, 95, 94.9, 97.6, 80, 120].map((pct) => toNative(height, pct))).toEqual([952, 952, 948, 976, 800, 1200]);
    for (let native = 800; native <= 1200; native += 4) expect(toNative(height, toNeutral(height, native) ?? 0)).toBe(native);
  });
});
