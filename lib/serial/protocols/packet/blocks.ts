import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import type { DriverDefinition, PacketField, SettingValue } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue } from "@/lib/serial/native";
import { fromBytes, toBytes } from "@/lib/serial/protocols/integer-bytes";
import type { PacketProtocol } from "./packets";

/** One block of one slot or mode: what one request reads or writes. */
export type BlockInstance = {
  /** `timing 3`, as the wire log shows it. */
  readonly name: string;
  readonly number: number;
  /** Slot or mode number; 0 for a block that stands once. */
  readonly repeat: number;
  readonly bytes: number;
  readonly settings: readonly { readonly key: NativeKey; readonly field: PacketField; readonly readable: boolean; readonly writable: boolean }[];
};

export type Blocks = { readonly all: readonly BlockInstance[]; readonly ofKey: ReadonlyMap<NativeKey, BlockInstance> };

/** Bytes of an integer that a double holds exactly. */
const MAX_INTEGER_BYTES = 6;

export function putField(protocol: PacketProtocol, field: PacketField, value: NativeValue, data: Uint8Array): void {
  const bytes = toBytes(value, field.bytes, field.encoding);
  data.set(field.encoding === "integer" && protocol.byteOrder === "little" ? bytes.reverse() : bytes, field.byteOffset);
}

export function takeField(protocol: PacketProtocol, field: PacketField, data: Uint8Array): NativeValue {
  const bytes = data.slice(field.byteOffset, field.byteOffset + field.bytes);
  return fromBytes(field.encoding === "integer" && protocol.byteOrder === "little" ? bytes.reverse() : bytes, field.encoding, field.signed);
}

function valueProblem(value: SettingValue, { bytes, signed, encoding }: PacketField): string | null {
  if (value.type === "text") return encoding === "ascii" && value.maxLength <= bytes ? null : "wants an ascii field as long as the text";
  if (encoding !== "integer" || bytes > MAX_INTEGER_BYTES) return `wants an integer of ${MAX_INTEGER_BYTES} bytes at most`;
  const natives = value.type === "integer" ? [value.min, value.max] : value.choices.map((choice) => choice.native);
  const [low, high] = signed ? [-(2 ** (8 * bytes - 1)), 2 ** (8 * bytes - 1) - 1] : [0, 2 ** (8 * bytes) - 1];
  return natives.every((native) => typeof native === "number" && native >= low && native <= high) ? null : `holds values that ${bytes} bytes can't`;
}

function fieldProblems(definition: DriverDefinition, protocol: PacketProtocol): PathMessage[] {
  const blocks = new Map(protocol.blocks.map((block) => [block.name, block]));
  const problems: PathMessage[] = [];
  const numbers = new Set(protocol.blocks.map((block) => block.number));
  if (numbers.size !== protocol.blocks.length || blocks.size !== protocol.blocks.length) problems.push({ path: "protocol.blocks", message: "have a name or number twice" });
  const owners = new Map<string, string>();
  definition.settings.forEach(({ wire, value, key }, index) => {
    const path = `settings[${index}].wire`;
    if (wire.kind !== "packet") return void problems.push({ path, message: "a packet driver wants a place in a block here" });
    const block = blocks.get(wire.field.block);
    const repeats = key.startsWith("slots[*]") ? "slots" : key.startsWith("modes[*]") ? "modes" : "once";
    if (!block || block.repeats !== repeats) return void problems.push({ path: `${path}.field.block`, message: `is no block that stands ${repeats === "once" ? "once" : `for each of the ${repeats}`}` });
    if (wire.field.byteOffset + wire.field.bytes > block.bytes) problems.push({ path: `${path}.field`, message: "reaches past the end of its block" });
    const problem = valueProblem(value, wire.field);
    if (problem) problems.push({ path: `${path}.field`, message: problem });
    for (let at = 0; at < wire.field.bytes; at += 1) {
      const byte = `${block.name} ${wire.field.byteOffset + at}`;
      if (owners.has(byte)) problems.push({ path: `${path}.field`, message: `shares a byte with ${owners.get(byte)}` });
      owners.set(byte, key);
    }
  });
  for (const [group, operations] of Object.entries({ status: definition.status, actions: definition.actions })) {
    for (const [name, operation] of Object.entries(operations)) {
      const own = operation?.kind === "packet" ? new Set(operation.fields.map(({ field }) => field.block)) : null;
      const block = own && blocks.get([...own][0] ?? "");
      if (operation && (own?.size !== 1 || block?.repeats !== "once")) problems.push({ path: `${group}.${name}`, message: "wants fields of one block that stands once" });
      else if (operation?.kind === "packet" && operation.fields.some(({ field }) => field.byteOffset + field.bytes > (block?.bytes ?? 0))) problems.push({ path: `${group}.${name}`, message: "reaches past the end of its block" });
    }
  }
  return problems.slice(0, 100);
}

/** The blocks of a packet driver with slots and modes counted out. Errors: path and sentence for each field that cannot work. */
export function compileBlocks(definition: DriverDefinition, protocol: PacketProtocol, settings: readonly CompiledSetting[]): Result<Blocks, PathMessage[]> {
  const problems = fieldProblems(definition, protocol);
  if (problems.length > 0) return fail(problems);
  const groups = new Map<string, CompiledSetting[]>();
  for (const setting of settings) {
    if (setting.source.wire.kind !== "packet") continue;
    const id = `${setting.source.wire.field.block} ${setting.number ?? 0}`;
    groups.set(id, [...(groups.get(id) ?? []), setting]);
  }
  const all: BlockInstance[] = [];
  const ofKey = new Map<NativeKey, BlockInstance>();
  for (const block of protocol.blocks) {
    const { first, count } = block.repeats === "slots" ? definition.slots : block.repeats === "modes" ? definition.modes : { first: 0, count: 1 };
    for (let repeat = first; repeat < first + count; repeat += 1) {
      const members = (groups.get(`${block.name} ${repeat}`) ?? []).flatMap(({ key, readable, writable, source: { wire } }) => (wire.kind === "packet" ? [{ key, field: wire.field, readable, writable }] : []));
      const instance: BlockInstance = { name: block.repeats === "once" ? block.name : `${block.name} ${repeat}`, number: block.number, repeat, bytes: block.bytes, settings: members };
      all.push(instance);
      for (const { key } of members) ofKey.set(key, instance);
    }
  }
  return ok({ all, ofKey });
}
