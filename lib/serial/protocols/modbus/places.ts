import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import type { DriverDefinition, ModbusField, SettingValue } from "@/lib/serial/driver/definition";
import type { NativeKey } from "@/lib/serial/native";
import { endOf, placeField, type PlacedField } from "./registers";

/** Largest register number and one. */
const REGISTERS = 65_536;
/** Words of an integer that a double holds exactly. */
const MAX_INTEGER_WORDS = 3;

function valueProblem(value: SettingValue, { words, signed, encoding }: ModbusField): string | null {
  if (value.type === "text") return encoding === "ascii" && value.maxLength <= 2 * words ? null : "wants ascii registers, two characters each";
  if (encoding !== "integer" || words > MAX_INTEGER_WORDS) return `wants an integer of ${MAX_INTEGER_WORDS} registers at most`;
  const natives = value.type === "integer" ? [value.min, value.max] : value.choices.map((choice) => choice.native);
  const [low, high] = signed ? [-(2 ** (16 * words - 1)), 2 ** (16 * words - 1) - 1] : [0, 2 ** (16 * words) - 1];
  return natives.every((native) => typeof native === "number" && native >= low && native <= high) ? null : `holds values that ${words} registers can't`;
}

/**
 * Where each setting of a Modbus driver lies.
 * Errors: path and sentence where a field cannot hold its setting, or two settings share a register.
 */
export function placesOf(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<ReadonlyMap<NativeKey, PlacedField>, PathMessage[]> {
  const problems: PathMessage[] = [];
  definition.settings.forEach(({ wire, value, key }, index) => {
    const path = `settings[${index}].wire`;
    if (wire.kind !== "modbus") return problems.push({ path, message: "a Modbus driver wants a register here" });
    const problem = valueProblem(value, wire.field);
    if (problem) problems.push({ path: `${path}.field`, message: problem });
    if (key.includes("[*]") && wire.field.stride < wire.field.words) problems.push({ path: `${path}.field.stride`, message: "is shorter than the field" });
    return problems.length;
  });
  for (const [group, operations] of Object.entries({ status: definition.status, actions: definition.actions })) {
    for (const [name, operation] of Object.entries(operations)) {
      if (operation && operation.kind !== "modbus") problems.push({ path: `${group}.${name}`, message: "a Modbus driver wants registers here" });
    }
  }
  if (problems.length > 0) return fail(problems);

  const places = new Map<NativeKey, PlacedField>();
  const owners = new Map<string, NativeKey>();
  const pathOf = new Map(definition.settings.map(({ key }, index) => [key, `settings[${index}].wire.field.register`]));
  for (const { key, pattern, scope, number, source } of settings) {
    if (source.wire.kind !== "modbus") continue;
    const path = pathOf.get(pattern) ?? key;
    const first = scope === "slot" ? definition.slots.first : definition.modes.first;
    const placed = placeField(source.wire.field, number === undefined ? 0 : number - first);
    if (endOf(placed) > REGISTERS) problems.push({ path, message: `lies beyond the last register, for ${key}` });
    for (let register = placed.first; register < endOf(placed); register += 1) {
      const owner = owners.get(`${placed.field.table} ${register}`);
      if (owner !== undefined) problems.push({ path, message: `shares register ${register} with ${owner}, for ${key}` });
      owners.set(`${placed.field.table} ${register}`, key);
    }
    places.set(key, placed);
    if (problems.length >= 100) break;
  }
  return problems.length > 0 ? fail(problems) : ok(places);
}
