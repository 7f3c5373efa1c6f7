import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting, Fields, Frame, Match, ProtocolCodec, WireRequest } from "@/lib/serial/driver/compiled";
import type { DriverDefinition, ModbusField, OperationWire } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeWrite } from "@/lib/serial/native";
import { characterMs } from "@/lib/serial/protocols/character-time";
import {
  createReplyDecoder, EXCEPTION_BIT, EXCEPTIONS, frameSilenceMs, MAX_READ_REGISTERS, MAX_WRITE_REGISTERS, READ_HOLDING, READ_INPUT, sealFrame, WRITE_MULTIPLE, WRITE_SINGLE,
} from "./frames";
import { placesOf } from "./places";
import { bestSpans, decodeField, encodeField, endOf, type PlacedField, type ReadSpan } from "./registers";
import { createStrikeOut } from "./strike-out";

type ModbusOperation = Extract<OperationWire, { kind: "modbus" }>;
type NamedField = { readonly name: string; readonly placed: PlacedField };

const OTHER: Match = { kind: "other" };
const word = (value: number) => [value >> 8, value & 0xff];

/** A reply of this unit to this function: its frame, or what it says instead. */
function matchFrame(unit: number, code: number, frame: Frame): Match | Uint8Array {
  if (frame.kind === "noise" || frame.bytes[0] !== unit) return OTHER;
  if (frame.bytes[1] === code) return frame.bytes;
  if (frame.bytes[1] !== (code | EXCEPTION_BIT)) return OTHER;
  const exception = frame.bytes[2] ?? 0;
  if (exception === 0x05 || exception === 0x06) return { kind: "busy" };
  return { kind: "refused", message: EXCEPTIONS[exception] ?? `exception ${exception}` };
}

/** Host side of Modbus RTU. Errors: path and sentence for each field that cannot work. */
export function createModbusCodec(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<ProtocolCodec, PathMessage[]> {
  const { protocol, transport, pace } = definition;
  if (protocol.kind !== "modbus-rtu") return fail([{ path: "protocol.kind", message: "is not modbus-rtu" }]);
  const places = placesOf(definition, settings);
  if (!places.ok) return places;
  const byKey = places.value;
  const { unit, maxReadGap } = protocol;
  const silenceMs = frameSilenceMs(transport.baudRate);
  const perCharacterMs = characterMs(transport);
  /** What one more request costs beside its registers: its 8 bytes, the reply's 5, work and two silences; two bytes a register. */
  const overheadRegisters = (13 * perCharacterMs + pace.workMs + 2 * silenceMs) / (2 * perCharacterMs);

  function readRequest({ table, first, count }: ReadSpan, reply: (registers: Uint8Array) => Match, keys: readonly NativeKey[]): WireRequest {
    const code = table === "input" ? READ_INPUT : READ_HOLDING;
    return {
      label: `read ${count} from ${table} register ${first}`, bytes: sealFrame([unit, code, ...word(first), ...word(count)]),
      replyBytes: 5 + 2 * count, extraMs: 0, named: false, idempotent: true, keys,
      match(frame) {
        const found = matchFrame(unit, code, frame);
        if (!(found instanceof Uint8Array)) return found;
        // A reply does not name its registers: another length answers another request.
        return found[2] === 2 * count ? reply(found.subarray(3, 3 + 2 * count)) : OTHER;
      },
    };
  }

  function writeRequest(first: number, data: Uint8Array, about: Pick<WireRequest, "extraMs" | "keys" | "label">, reply: Match): WireRequest {
    const count = data.length / 2;
    const code = count === 1 ? WRITE_SINGLE : WRITE_MULTIPLE;
    const head = [unit, code, ...word(first)];
    const bytes = count === 1 ? sealFrame([...head, ...data]) : sealFrame([...head, ...word(count), data.length, ...data]);
    const echo = count === 1 ? bytes : sealFrame([...head, ...word(count)]);
    return {
      ...about, bytes, replyBytes: 8, named: false, idempotent: false,
      match(frame) {
        const found = matchFrame(unit, code, frame);
        if (!(found instanceof Uint8Array)) return found;
        return found.every((byte, index) => byte === echo[index]) ? reply : OTHER;
      },
    };
  }

  function planReads(keys: readonly NativeKey[]): readonly WireRequest[] {
    const known = keys.flatMap((key) => {
      const placed = byKey.get(key);
      return placed ? [{ key, placed }] : [];
    });
    const spans = bestSpans(known.map(({ placed }) => placed), { overheadRegisters, maxGap: maxReadGap, most: MAX_READ_REGISTERS });
    return spans.map((span) => {
      const members = span.members.flatMap((index) => known[index] ?? []);
      const reply = (registers: Uint8Array): Match => ({ kind: "reply", values: Object.fromEntries(members.map(({ key, placed }) => [key, decodeField(placed, registers, span.first)])), fields: {} });
      return readRequest(span, reply, members.map(({ key }) => key));
    });
  }

  function planWrite(writes: readonly NativeWrite[]): Result<WireRequest, string> {
    const placed: { field: ModbusField; first: number; value: NativeWrite["value"] }[] = [];
    for (const { key, value } of writes) {
      const place = byKey.get(key);
      const { wire } = settings.find((setting) => setting.key === key)?.source ?? {};
      if (!place || wire?.kind !== "modbus" || !wire.writable || place.field.table === "input") return fail(`The driver has no way to write ${key}.`);
      placed.push({ ...place, value });
    }
    placed.sort((a, b) => a.first - b.first);
    const [begin] = placed;
    if (!begin) return fail("A write names at least one setting.");
    if (placed.some((one, index) => index > 0 && one.first !== endOf(placed[index - 1] ?? one))) return fail("One request writes neighbouring registers.");
    const data = Uint8Array.from(placed.flatMap(({ field, value }) => [...encodeField(field, value)]));
    if (data.length > 2 * MAX_WRITE_REGISTERS) return fail(`One request writes ${MAX_WRITE_REGISTERS} registers at most.`);
    const values = Object.fromEntries(writes.map(({ key, value }) => [key, value]));
    const keys = writes.map(({ key }) => key);
    return ok(writeRequest(begin.first, data, { extraMs: pace.writeSettleMs, keys, label: `write ${keys.join(", ")}` }, { kind: "reply", values, fields: {} }));
  }

  const namedFields = ({ fields }: ModbusOperation): NamedField[] => fields.map(({ name, field }) => ({ name, placed: { field, first: field.register } }));

  return ok({
    kind: "modbus-rtu",
    silenceMs,
    planReads,
    planWrite,
    planStatus(name) {
      const wire = definition.status[name];
      if (wire?.kind !== "modbus") return null;
      const fields = namedFields(wire);
      const [span] = bestSpans(fields.map(({ placed }) => placed), { overheadRegisters: 1000, maxGap: MAX_READ_REGISTERS, most: MAX_READ_REGISTERS });
      if (!span) return null;
      return readRequest(span, (registers) => ({ kind: "reply", values: {}, fields: Object.fromEntries(fields.map(({ name: field, placed }) => [field, decodeField(placed, registers, span.first)])) }), []);
    },
    planAction(name, given: Fields) {
      const wire = definition.actions[name];
      if (wire?.kind !== "modbus") return null;
      const [only] = namedFields(wire);
      if (!only) return null;
      const value = wire.value ?? given[only.name] ?? 0;
      const extraMs = name === "commit" ? definition.memory.commitTakesMs : 0;
      return writeRequest(only.placed.first, encodeField(only.placed.field, value), { extraMs, keys: [], label: name }, { kind: "reply", values: {}, fields: given });
    },
    createDecoder: createReplyDecoder,
    // A write's reply repeats its request by rule: nothing can be told to be an echo.
    isEcho: () => false,
    strikeOut: createStrikeOut(definition, settings, byKey),
  });
}
