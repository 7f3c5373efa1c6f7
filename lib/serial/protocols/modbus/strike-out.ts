import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeKey } from "@/lib/serial/native";
import { crossOutBytes } from "@/lib/serial/protocols/integer-bytes";
import { isSealed, READ_HOLDING, READ_INPUT, sealFrame, WRITE_MULTIPLE, WRITE_SINGLE } from "./frames";
import { endOf, type PlacedField } from "./registers";

const wordAt = (bytes: Uint8Array, at: number) => (bytes[at] ?? 0) * 256 + (bytes[at + 1] ?? 0);

/** Makes the function that takes names and serial numbers out of a frame; the CRC is renewed. */
export function createStrikeOut(
  definition: DriverDefinition, settings: readonly CompiledSetting[], byKey: ReadonlyMap<NativeKey, PlacedField>,
): (bytes: Uint8Array, request?: Uint8Array) => Uint8Array {
  const secret: PlacedField[] = settings.filter((setting) => setting.value.type === "text").flatMap((setting) => byKey.get(setting.key) ?? []);
  const { identity } = definition.status;
  if (identity?.kind === "modbus") for (const { name, field } of identity.fields) if (name === "serial") secret.push({ field, first: field.register });

  function cross(frame: Uint8Array, dataAt: number, first: number, count: number, table: "holding" | "input"): Uint8Array {
    const crossed = frame.slice();
    for (const placed of secret) {
      if (placed.field.table !== table) continue;
      const from = Math.max(placed.first, first);
      const to = Math.min(endOf(placed), first + count);
      if (from >= to) continue;
      const [begin, end] = [dataAt + 2 * (from - first), dataAt + 2 * (to - first)];
      crossed.set(placed.field.encoding === "ascii" ? crossOutBytes(crossed.subarray(begin, end)) : new Uint8Array(end - begin), begin);
    }
    return sealFrame([...crossed.subarray(0, -2)]);
  }

  return (bytes, request) => {
    if (!isSealed(bytes)) return crossOutBytes(bytes);
    const code = bytes[1] ?? 0;
    // Replies to reads have an odd length, so eight bytes are a request to read or a write's reply: neither holds a name.
    if (code === WRITE_SINGLE) return cross(bytes, 4, wordAt(bytes, 2), 1, "holding");
    if (code === WRITE_MULTIPLE && bytes.length > 8) return cross(bytes, 7, wordAt(bytes, 2), wordAt(bytes, 4), "holding");
    if (bytes.length === 8 || (code !== READ_HOLDING && code !== READ_INPUT)) return bytes;
    const isAnswer = request !== undefined && request[1] === code && bytes[2] === 2 * wordAt(request, 4);
    if (isAnswer) return cross(bytes, 3, wordAt(request, 2), wordAt(request, 4), code === READ_INPUT ? "input" : "holding");
    // What it answers is not known, so it could hold anything.
    return sealFrame([...bytes.subarray(0, 3), ...crossOutBytes(bytes.subarray(3, -2))]);
  };
}
