import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import { createModbusCodec } from "@/lib/serial/protocols/modbus/modbus-codec";
import { createPacketCodec } from "@/lib/serial/protocols/packet/packet-codec";
import { createTextCodec } from "@/lib/serial/protocols/text/text-codec";
import type { NativeValue } from "@/lib/serial/native";
import type { CompiledDriver, CompiledSetting, ProtocolCodec } from "./compiled";
import { MAX_SETTINGS, type DriverDefinition, type DriverSetting } from "./definition";
import { NEUTRAL_PATHS } from "./neutral";
import { operationProblems } from "./operation-fields";

type Scope = { readonly scope: CompiledSetting["scope"]; readonly numbers: readonly (number | undefined)[] };

function scopeOf(pattern: string, { slots, modes }: DriverDefinition): Scope {
  const counted = ({ first, count }: { first: number; count: number }) => Array.from({ length: count }, (_, index) => first + index);
  if (pattern.startsWith("slots[*]")) return { scope: "slot", numbers: counted(slots) };
  if (pattern.startsWith("modes[*]")) return { scope: "mode", numbers: counted(modes) };
  return { scope: "everywhere", numbers: [undefined] };
}

const NATIVE_KEY = /^(?:(?:slots|modes)\[\*\]\.)?native\.[A-Za-z][A-Za-z0-9.]*$/u;

/** The native value is one that the setting can hold. Null: it is; else the reason, in one sentence. */
export function nativeProblem(value: DriverSetting["value"], native: NativeValue): string | null {
  if (value.type === "choice") return value.choices.some((choice) => choice.native === native) ? null : `${native} is none of its choices`;
  if (value.type === "text") {
    if (typeof native !== "string") return "is not a text";
    if (native.length > value.maxLength) return `is longer than ${value.maxLength} characters`;
    return [...native].every((character) => value.characters.includes(character)) ? null : "has characters that the device does not take";
  }
  if (typeof native !== "number" || !Number.isInteger(native)) return "is not a whole number";
  if (native < value.min || native > value.max) return `${native} is outside ${value.min} to ${value.max}`;
  return (native - value.min) % value.step === 0 ? null : `${native} is not on a step of ${value.step}`;
}

function settingProblems(setting: DriverSetting, path: string): PathMessage[] {
  const problems: PathMessage[] = [];
  const { key, value } = setting;
  const kind = NEUTRAL_PATHS[key];
  if (kind === undefined && !NATIVE_KEY.test(key)) problems.push({ path: `${path}.key`, message: `${key} is neither a neutral path nor a native key (native.…)` });
  if (value.type === "integer" && value.min > value.max) problems.push({ path: `${path}.value`, message: "its least value is above its greatest" });
  const wanted = kind === "number" || kind === "mode-key" ? "integer" : kind === "text" ? "text" : kind === undefined ? value.type : "choice";
  if (value.type !== wanted) problems.push({ path: `${path}.value.type`, message: `${key} wants the type ${wanted}` });
  if (kind === "flag" && value.type === "choice" && value.choices.some((choice) => typeof choice.neutral !== "boolean")) {
    problems.push({ path: `${path}.value.choices`, message: "wants true and false as neutral values" });
  }
  const initial = nativeProblem(value, setting.initial);
  if (initial) problems.push({ path: `${path}.initial`, message: initial });
  return problems;
}

/** Counts slots and modes out. Errors: path and sentence. */
function expandSettings(definition: DriverDefinition): Result<CompiledSetting[], PathMessage[]> {
  const problems = definition.settings.flatMap((setting, index) => settingProblems(setting, `settings[${index}]`));
  if (new Set(definition.settings.map((setting) => setting.key)).size !== definition.settings.length) problems.push({ path: "settings", message: "name a key twice" });
  const total = definition.settings.reduce((sum, { key }) => sum + scopeOf(key, definition).numbers.length, 0);
  if (total > MAX_SETTINGS) problems.push({ path: "settings", message: `come to ${total} in all; ${MAX_SETTINGS} at most` });
  if (problems.length > 0) return fail(problems);

  return ok(
    definition.settings.flatMap((source) => {
      const { scope, numbers } = scopeOf(source.key, definition);
      const { wire } = source;
      return numbers.map((number): CompiledSetting => {
        const key = number === undefined ? source.key : source.key.replace("[*]", `[${number}]`);
        return {
          key, pattern: source.key, label: source.label, scope, number, neutral: source.key in NEUTRAL_PATHS,
          value: source.value, initial: definition.factory[key] ?? source.initial, source,
          readable: wire.kind === "text" ? wire.read !== undefined : wire.readable,
          writable: wire.kind === "text" ? wire.write !== undefined : wire.writable,
        };
      });
    }),
  );
}

function factoryProblems(definition: DriverDefinition, byKey: ReadonlyMap<string, CompiledSetting>): PathMessage[] {
  return Object.entries(definition.factory).flatMap(([key, value]) => {
    const setting = byKey.get(key);
    const message = setting ? nativeProblem(setting.value, value) : "is no setting of this driver";
    return message ? [{ path: `factory.${key}`, message }] : [];
  });
}

function createCodec(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<ProtocolCodec, PathMessage[]> {
  switch (definition.protocol.kind) {
    case "text":
      return createTextCodec(definition, settings);
    case "modbus-rtu":
      return createModbusCodec(definition, settings);
    case "packet":
      return createPacketCodec(definition, settings);
  }
}

/**
 * Works out, once, what the use of a driver needs: slots and modes counted out, templates compiled, the codec.
 * @param definition a parsed definition (`driverDefinitionSchema`)
 * Errors: every complaint with its path in the definition.
 */
export function compileDriver(definition: DriverDefinition): Result<CompiledDriver, PathMessage[]> {
  const expanded = expandSettings(definition);
  if (!expanded.ok) return expanded;
  const settings = expanded.value;
  const byKey = new Map(settings.map((setting) => [setting.key, setting]));
  const problems = [...factoryProblems(definition, byKey), ...operationProblems(definition)];
  if (problems.length > 0) return fail(problems);
  const codec = createCodec(definition, settings);
  return codec.ok ? ok({ definition, settings, byKey, codec: codec.value }) : codec;
}
