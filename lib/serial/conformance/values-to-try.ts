import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { NativeValue } from "@/lib/serial/native";

/** One value of one setting, and whether the device is to take it. */
export type ValueCase = { readonly setting: CompiledSetting; readonly value: NativeValue; readonly what: "least" | "greatest" | "one step" | "between steps" | "beyond" | "choice" | "empty" | "longest"; readonly valid: boolean };

/** Choices of one setting that are tried. */
const MAX_CHOICES = 16;
/** Characters that hardly any device takes in a name. */
const STRANGE = ["\u00e9", "\u0416", "~", "\u20ac"];
const UNKNOWN_WORD = "NoSuchWord";

/** Whether the wire can carry this number at all: what does not fit its registers or bytes would arrive as another one. */
export function canBeSaid({ source: { wire } }: CompiledSetting, value: number): boolean {
  if (wire.kind === "text") return Math.abs(value) < 1e15;
  const bits = wire.kind === "modbus" ? 16 * wire.field.words : 8 * wire.field.bytes;
  return wire.field.signed ? value >= -(2 ** (bits - 1)) && value < 2 ** (bits - 1) : value >= 0 && value < 2 ** bits;
}

/** `count` of a list, its first and last among them, evenly. */
export function evenly<T>(list: readonly T[], count: number): readonly T[] {
  if (list.length <= count) return list;
  if (count <= 1) return list.slice(0, count);
  return Array.from({ length: count }, (_, index) => list[Math.round((index * (list.length - 1)) / (count - 1))]).filter((one) => one !== undefined);
}

function integerCases(setting: CompiledSetting): readonly ValueCase[] {
  const { value } = setting;
  if (value.type !== "integer") return [];
  const cases: ValueCase[] = [{ setting, value: value.min, what: "least", valid: true }, { setting, value: value.max - ((value.max - value.min) % value.step), what: "greatest", valid: true }];
  if (value.min + value.step <= value.max) cases.push({ setting, value: value.min + value.step, what: "one step", valid: true });
  if (value.step > 1 && value.min + 1 < value.max) cases.push({ setting, value: value.min + 1, what: "between steps", valid: false });
  for (const beyond of [value.max + value.step, value.min - value.step]) if (canBeSaid(setting, beyond)) cases.push({ setting, value: beyond, what: "beyond", valid: false });
  return cases;
}

function choiceCases(setting: CompiledSetting): readonly ValueCase[] {
  const { value } = setting;
  if (value.type !== "choice") return [];
  const cases = evenly(value.choices, MAX_CHOICES).map(({ native }): ValueCase => ({ setting, value: native, what: "choice", valid: true }));
  const numbers = value.choices.flatMap(({ native }) => (typeof native === "number" ? [native] : []));
  const beyond = numbers.length === value.choices.length ? Math.max(...numbers) + 1 : UNKNOWN_WORD;
  return typeof beyond === "string" || canBeSaid(setting, beyond) ? [...cases, { setting, value: beyond, what: "beyond", valid: false }] : cases;
}

function textCases(setting: CompiledSetting): readonly ValueCase[] {
  const { value } = setting;
  if (value.type !== "text") return [];
  // A blank at an end may be cut off by a device, so the longest text is of the last character it takes that is none.
  const filler = [...value.characters].reverse().find((character) => character.trim() !== "" && character.length === 1);
  const strange = STRANGE.find((character) => !value.characters.includes(character));
  return [
    { setting, value: "", what: "empty", valid: true },
    ...(filler === undefined ? [] : [{ setting, value: filler.repeat(value.maxLength), what: "longest", valid: true } as const]),
    ...(strange === undefined ? [] : [{ setting, value: strange, what: "beyond", valid: false } as const]),
  ];
}

/** Every value that is tried on one setting. */
export function casesOf(setting: CompiledSetting): readonly ValueCase[] {
  return [...integerCases(setting), ...choiceCases(setting), ...textCases(setting)];
}

export type ValuePlan = { readonly cases: readonly ValueCase[]; /** Settings that were left out, of so many. */ readonly leftOut: number; readonly settings: number };

/**
 * The values of every setting that can be written, in the driver's order. Where that is more than `most`, slots and modes are
 * thinned out evenly, each setting keeping its first and its last.
 */
export function planValues(driver: CompiledDriver, most: number): ValuePlan {
  const byPattern = new Map<string, CompiledSetting[]>();
  for (const setting of driver.settings) {
    if (!setting.writable) continue;
    const group = byPattern.get(setting.pattern) ?? [];
    group.push(setting);
    byPattern.set(setting.pattern, group);
  }
  const groups = [...byPattern.values()].map((settings) => ({ settings, each: settings[0] ? casesOf(settings[0]).length : 0 }));
  const total = groups.reduce((sum, { settings, each }) => sum + settings.length * each, 0);
  const share = Math.min(1, most / Math.max(1, total));
  const chosen = groups.flatMap(({ settings }) => evenly(settings, Math.max(2, Math.floor(settings.length * share))));
  const all = groups.reduce((sum, { settings }) => sum + settings.length, 0);
  return { cases: chosen.flatMap(casesOf), leftOut: all - chosen.length, settings: all };
}
