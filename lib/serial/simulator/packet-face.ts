import type { Fields } from "@/lib/serial/driver/compiled";
import type { ActionName, PacketField, StatusName } from "@/lib/serial/driver/definition";
import { compileBlocks, putField, takeField, type BlockInstance } from "@/lib/serial/protocols/packet/blocks";
import { BUSY_REASON, createPacketDecoder, openPacket, READ_BLOCK, REFUSED, REPLY_BIT, sealPacket, WRITE_BLOCK, type PacketProtocol } from "@/lib/serial/protocols/packet/packets";
import type { FaceMaker } from "./device-face";
import type { DeviceAnswer, DeviceOperation } from "./device-operations";
import { createWorkQueue } from "./work-queue";

/** A packet that stood still this long is not gone on with. */
const BROKEN_PACKET_MS = 50;
const UNKNOWN_ORDER = 1;
const UNKNOWN_BLOCK = 2;
const OUT_OF_RANGE = 3;
const CONFLICT = 4;
const WRONG_LENGTH = 5;

type NamedField = { readonly name: string; readonly field: PacketField };

/** The device's side of the packet protocol. */
export const createPacketFace: FaceMaker = ({ driver, clock, perform, send }) => {
  const { definition } = driver;
  if (definition.protocol.kind !== "packet") throw new Error("A packet face needs a packet driver");
  const protocol: PacketProtocol = definition.protocol;
  const compiled = compileBlocks(definition, protocol, driver.settings);
  if (!compiled.ok) throw new Error("A compiled driver has blocks that compile");
  const blocks = new Map(compiled.value.all.map((block) => [`${block.number} ${block.repeat}`, block]));
  const decoder = createPacketDecoder(protocol);
  const work = createWorkQueue(clock);
  const numberOf = (block: string) => protocol.blocks.find(({ name }) => name === block)?.number;
  let lastMs = -Infinity;

  const statuses = new Map<number | undefined, { readonly name: StatusName; readonly fields: readonly NamedField[] }>();
  for (const [name, wire] of Object.entries(definition.status)) {
    // The keys of the definition's records are its status and action names.
    if (wire?.kind === "packet") statuses.set(numberOf(wire.fields[0]?.field.block ?? ""), { name: name as StatusName, fields: wire.fields });
  }
  const actions = new Map<number | undefined, { readonly name: ActionName; readonly fields: readonly NamedField[]; readonly value: number | undefined }[]>();
  for (const [name, wire] of Object.entries(definition.actions)) {
    if (wire?.kind !== "packet") continue;
    const number = numberOf(wire.fields[0]?.field.block ?? "");
    actions.set(number, [...(actions.get(number) ?? []), { name: name as ActionName, fields: wire.fields, value: wire.value }]);
  }

  function readOperation(block: BlockInstance): DeviceOperation | null {
    const status = statuses.get(block.number);
    if (status) return { kind: "status", name: status.name };
    const keys = block.settings.filter(({ readable }) => readable).map(({ key }) => key);
    return keys.length > 0 && keys.length === block.settings.length ? { kind: "read", keys } : null;
  }

  function writeOperation(block: BlockInstance, data: Uint8Array): DeviceOperation | null {
    for (const { name, fields, value } of actions.get(block.number) ?? []) {
      const given: Fields = Object.fromEntries(fields.map((one) => [one.name, takeField(protocol, one.field, data)]));
      if (value === undefined || Object.values(given).every((one) => one === value)) return { kind: "action", name, fields: given };
    }
    const writes = block.settings.map(({ key, field }) => ({ key, value: takeField(protocol, field, data) }));
    return writes.length > 0 && block.settings.every(({ writable }) => writable) ? { kind: "write", writes } : null;
  }

  function replyData(block: BlockInstance, answer: DeviceAnswer & { kind: "values" }): Uint8Array {
    const data = new Uint8Array(block.bytes);
    for (const { key, field } of block.settings) putField(protocol, field, answer.values[key] ?? 0, data);
    for (const { name, field } of statuses.get(block.number)?.fields ?? []) putField(protocol, field, answer.fields[name] ?? 0, data);
    return data;
  }

  /** What a request asks for, or the reason why it cannot be. */
  function operationOf(payload: Uint8Array): { readonly block: BlockInstance; readonly operation: DeviceOperation } | number {
    const [order, number, repeat] = payload;
    const block = blocks.get(`${number} ${repeat}`);
    if (order !== READ_BLOCK && order !== WRITE_BLOCK) return UNKNOWN_ORDER;
    if (!block) return UNKNOWN_BLOCK;
    if (payload.length !== 3 + (order === WRITE_BLOCK ? block.bytes : 0)) return WRONG_LENGTH;
    const operation = order === READ_BLOCK ? readOperation(block) : writeOperation(block, payload.slice(3));
    return operation ? { block, operation } : UNKNOWN_BLOCK;
  }

  function serve(payload: Uint8Array): void {
    const [order = 0, number = 0, repeat = 0] = payload;
    const refuse = (reason: number) => send(sealPacket(protocol, [REFUSED, order, number, repeat, reason]));
    const asked = operationOf(payload);
    if (typeof asked === "number") return refuse(asked);
    const answer = perform(asked.operation);
    if (answer.kind === "busy") return refuse(BUSY_REASON);
    if (answer.kind === "refused") return refuse(answer.code === -221 ? CONFLICT : OUT_OF_RANGE);
    if (answer.kind === "values") send(sealPacket(protocol, [order | REPLY_BIT, number, repeat, ...(order === READ_BLOCK ? replyData(asked.block, answer) : [])]));
  }

  function workMs(payload: Uint8Array): number {
    const asked = operationOf(payload);
    const operation = typeof asked === "number" ? null : asked.operation;
    if (operation?.kind === "write") return definition.pace.workMs + definition.pace.writeSettleMs;
    return definition.pace.workMs + (operation?.kind === "action" && operation.name === "commit" ? definition.memory.commitTakesMs : 0);
  }

  return {
    receive(bytes) {
      if (clock.nowMs() - lastMs > BROKEN_PACKET_MS) decoder.flush();
      lastMs = clock.nowMs();
      for (const frame of decoder.push(bytes)) {
        const payload = frame.kind === "frame" ? openPacket(protocol, frame.bytes) : null;
        if (payload && payload.length >= 3) work.add(workMs(payload), () => serve(payload));
      }
    },
    reset() {
      decoder.flush();
      work.clear();
    },
    chatter: (line) => new TextEncoder().encode(line),
  };
};
