import type { Fields } from "@/lib/serial/driver/compiled";
import type { ActionName, ModbusField, StatusName } from "@/lib/serial/driver/definition";
import type { NativeValue, NativeWrite } from "@/lib/serial/native";
import { EXCEPTION_BIT, frameSilenceMs, isSealed, MAX_READ_REGISTERS, MAX_WRITE_REGISTERS, READ_HOLDING, READ_INPUT, sealFrame, WRITE_MULTIPLE, WRITE_SINGLE } from "@/lib/serial/protocols/modbus/frames";
import { decodeField, encodeField, placeField, type PlacedField } from "@/lib/serial/protocols/modbus/registers";
import type { FaceMaker } from "./device-face";
import type { DeviceAnswer } from "./device-operations";
import { createWorkQueue } from "./work-queue";

/** A pause this long within a request ends it. The specification's 1.5 characters are less than a host's own system keeps. */
const BROKEN_REQUEST_MS = 20;
const MAX_REQUEST_BYTES = 256;
/** No register number can be refused by SCPI's codes: out of range and illegal values are 03, conflicts 04, unknown ones 02. */
const EXCEPTION_OF: Readonly<Record<number, number>> = { [-222]: 0x03, [-224]: 0x03, [-113]: 0x02 };

type Owner = { readonly placed: PlacedField } & (
  | { readonly kind: "setting"; readonly key: string }
  | { readonly kind: "status"; readonly status: StatusName; readonly name: string }
  | { readonly kind: "action"; readonly action: ActionName; readonly name: string; readonly value: number | undefined }
);

/** Length of a request by its first bytes; undefined while they don't tell. */
function requestLength(head: readonly number[]): number | undefined {
  const code = head[1];
  if (code === undefined) return undefined;
  if (code !== WRITE_MULTIPLE) return 8;
  return head[6] === undefined ? undefined : 9 + head[6];
}

const wordAt = (bytes: Uint8Array, at: number) => (bytes[at] ?? 0) * 256 + (bytes[at + 1] ?? 0);

/** The device's side of Modbus RTU. */
export const createModbusFace: FaceMaker = ({ driver, clock, perform, send }) => {
  const { protocol, pace, memory, transport, slots, modes } = driver.definition;
  if (protocol.kind !== "modbus-rtu") throw new Error("A Modbus face needs a Modbus driver");
  const { unit, maxReadGap } = protocol;
  const silenceMs = frameSilenceMs(transport.baudRate);
  const work = createWorkQueue(clock);
  const readable = { holding: new Map<number, Owner>(), input: new Map<number, Owner>() };
  const writable = new Map<number, Owner[]>();
  let held: number[] = [];
  let lastMs = -Infinity;

  function claim(owner: Owner, field: ModbusField): void {
    for (let register = owner.placed.first; register < owner.placed.first + field.words; register += 1) readable[field.table].set(register, owner);
  }
  const allowWrite = (owner: Owner) => writable.set(owner.placed.first, [...(writable.get(owner.placed.first) ?? []), owner]);

  for (const { key, scope, number, source } of driver.settings) {
    if (source.wire.kind !== "modbus") continue;
    const index = number === undefined ? 0 : number - (scope === "slot" ? slots : modes).first;
    const owner: Owner = { kind: "setting", key, placed: placeField(source.wire.field, index) };
    if (source.wire.readable) claim(owner, source.wire.field);
    if (source.wire.writable) allowWrite(owner);
  }
  for (const [status, wire] of Object.entries(driver.definition.status)) {
    if (wire?.kind !== "modbus") continue;
    // The keys of the definition's record are its status names.
    for (const { name, field } of wire.fields) claim({ kind: "status", status: status as StatusName, name, placed: placeField(field, 0) }, field);
  }
  for (const [action, wire] of Object.entries(driver.definition.actions)) {
    if (wire?.kind !== "modbus") continue;
    for (const { name, field } of wire.fields) allowWrite({ kind: "action", action: action as ActionName, name, value: wire.value, placed: placeField(field, 0) });
  }

  const except = (code: number, exception: number) => send(sealFrame([unit, code | EXCEPTION_BIT, exception]));

  /** The answer of an operation, or null after what went wrong was said (or nothing was). */
  function valuesOf(code: number, answer: DeviceAnswer): (DeviceAnswer & { kind: "values" }) | null {
    if (answer.kind === "values") return answer;
    if (answer.kind === "busy") except(code, 0x06);
    if (answer.kind === "refused") except(code, EXCEPTION_OF[answer.code] ?? 0x04);
    return null;
  }

  /** What is asked once for all registers of a read: the settings together, each status by itself. */
  function lookUp(code: number, owners: readonly Owner[]): ReadonlyMap<Owner, NativeValue> | null {
    const found = new Map<Owner, NativeValue>();
    const keys = owners.flatMap((owner) => (owner.kind === "setting" ? [owner.key] : []));
    if (keys.length > 0) {
      const answer = valuesOf(code, perform({ kind: "read", keys }));
      if (!answer) return null;
      for (const owner of owners) if (owner.kind === "setting") found.set(owner, answer.values[owner.key] ?? 0);
    }
    for (const status of new Set(owners.flatMap((owner) => (owner.kind === "status" ? [owner.status] : [])))) {
      const answer = valuesOf(code, perform({ kind: "status", name: status }));
      if (!answer) return null;
      for (const owner of owners) if (owner.kind === "status" && owner.status === status) found.set(owner, answer.fields[owner.name] ?? 0);
    }
    return found;
  }

  function read(code: number, first: number, count: number): void {
    const table = readable[code === READ_INPUT ? "input" : "holding"];
    if (count < 1 || count > MAX_READ_REGISTERS) return except(code, 0x03);
    const owners = new Set<Owner>();
    let gap = 0;
    for (let register = first; register < first + count; register += 1) {
      const owner = table.get(register);
      gap = owner ? 0 : gap + 1;
      if (gap > maxReadGap) return except(code, 0x02);
      if (owner) owners.add(owner);
    }
    if (owners.size === 0) return except(code, 0x02);
    const values = lookUp(code, [...owners]);
    if (!values) return;
    const data = new Uint8Array(2 * count);
    for (const [{ placed }, value] of values) {
      encodeField(placed.field, value).forEach((byte, index) => {
        const at = 2 * (placed.first - first) + index;
        if (at >= 0 && at < data.length) data[at] = byte;
      });
    }
    send(sealFrame([unit, code, data.length, ...data]));
  }

  /** The settings that exactly fill the registers written, or the order that they give; null: neither. */
  function written(first: number, data: Uint8Array): { readonly writes: readonly NativeWrite[] } | { readonly action: ActionName; readonly fields: Fields } | null {
    const writes: NativeWrite[] = [];
    for (let at = 0; at < data.length; ) {
      const owners = writable.get(first + at / 2) ?? [];
      const owner = owners.find((one) => one.kind !== "action" || one.value === undefined || one.value === decodeField(one.placed, data, first)) ?? owners[0];
      if (!owner || at + 2 * owner.placed.field.words > data.length) return null;
      const value = decodeField(owner.placed, data, first);
      if (owner.kind === "action") return at === 0 && data.length === 2 * owner.placed.field.words ? { action: owner.action, fields: { [owner.name]: value } } : null;
      if (owner.kind === "setting") writes.push({ key: owner.key, value });
      at += 2 * owner.placed.field.words;
    }
    return { writes };
  }

  function write(code: number, first: number, data: Uint8Array, reply: readonly number[]): void {
    const what = written(first, data);
    if (!what) return except(code, 0x02);
    const answer = "writes" in what ? perform({ kind: "write", writes: what.writes }) : perform({ kind: "action", name: what.action, fields: what.fields });
    if (valuesOf(code, answer)) send(sealFrame(reply));
  }

  function serve(frame: Uint8Array): void {
    const code = frame[1] ?? 0;
    const first = wordAt(frame, 2);
    const head = [...frame.subarray(0, 6)];
    if (code === READ_HOLDING || code === READ_INPUT) return read(code, first, wordAt(frame, 4));
    if (code === WRITE_SINGLE) return write(code, first, frame.slice(4, 6), head);
    if (code !== WRITE_MULTIPLE) return except(code, 0x01);
    const count = wordAt(frame, 4);
    if (count < 1 || count > MAX_WRITE_REGISTERS || frame[6] !== 2 * count) return except(code, 0x03);
    write(code, first, frame.slice(7, 7 + 2 * count), head);
  }

  function workMs(frame: Uint8Array): number {
    const isWrite = frame[1] === WRITE_SINGLE || frame[1] === WRITE_MULTIPLE;
    const what = isWrite ? written(wordAt(frame, 2), frame.slice(frame[1] === WRITE_SINGLE ? 4 : 7, -2)) : null;
    const isCommit = what !== null && "action" in what && what.action === "commit";
    return silenceMs + pace.workMs + (isCommit ? memory.commitTakesMs : what && "writes" in what ? pace.writeSettleMs : 0);
  }

  return {
    receive(bytes) {
      if (clock.nowMs() - lastMs > BROKEN_REQUEST_MS) held = [];
      lastMs = clock.nowMs();
      for (const byte of bytes) {
        if (held.length < MAX_REQUEST_BYTES) held.push(byte);
        if (held.length !== requestLength(held)) continue;
        const frame = Uint8Array.from(held);
        held = [];
        // Broadcasts and other units' requests get no answer.
        if (isSealed(frame) && frame[0] === unit) work.add(workMs(frame), () => serve(frame));
      }
    },
    reset() {
      held = [];
      work.clear();
    },
    chatter: (line) => new TextEncoder().encode(line),
  };
};
