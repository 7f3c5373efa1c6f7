import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting, Fields, Match, ProtocolCodec, WireRequest } from "@/lib/serial/driver/compiled";
import type { DriverDefinition, OperationWire } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import { crossOutBytes } from "@/lib/serial/protocols/integer-bytes";
import { compileBlocks, putField, takeField, type BlockInstance } from "./blocks";
import { BUSY_REASON, createPacketDecoder, openPacket, READ_BLOCK, REASONS, REFUSED, REPLY_BIT, sealPacket, WRITE_BLOCK } from "./packets";

const OTHER: Match = { kind: "other" };
type Place = { readonly number: number; readonly repeat: number };

/** Host side of the packet protocol. Errors: path and sentence for each field that cannot work. */
export function createPacketCodec(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<ProtocolCodec, PathMessage[]> {
  const { protocol, pace } = definition;
  if (protocol.kind !== "packet") return fail([{ path: "protocol.kind", message: "is not packet" }]);
  const packets = protocol;
  const compiled = compileBlocks(definition, packets, settings);
  if (!compiled.ok) return compiled;
  const blocks = compiled.value;
  const initial = new Map(settings.map((setting) => [setting.key, setting.initial]));

  function request(order: number, { number, repeat }: Place, data: Uint8Array, replyData: Uint8Array, about: Pick<WireRequest, "label" | "extraMs" | "idempotent" | "keys">, reply: (data: Uint8Array) => Match): WireRequest {
    const head = [order | REPLY_BIT, number, repeat];
    return {
      ...about, named: true, bytes: sealPacket(packets, [order, number, repeat, ...data]), replyBytes: sealPacket(packets, [...head, ...replyData]).length,
      match(frame) {
        const payload = frame.kind === "frame" ? openPacket(packets, frame.bytes) : null;
        if (!payload) return OTHER;
        if (payload[0] === REFUSED && payload[1] === order && payload[2] === number && payload[3] === repeat) {
          const reason = payload[4] ?? 0;
          return reason === BUSY_REASON ? { kind: "busy" } : { kind: "refused", message: REASONS[reason] ?? `reason ${reason}` };
        }
        if (!head.every((byte, index) => payload[index] === byte)) return OTHER;
        if (payload.length !== head.length + replyData.length) return { kind: "malformed", message: `The answer to “${about.label}” has ${payload.length - head.length} bytes, not ${replyData.length}.` };
        return reply(payload.subarray(head.length));
      },
    };
  }

  function blockData(block: BlockInstance, valueOf: (key: NativeKey) => NativeValue): Uint8Array {
    const data = new Uint8Array(block.bytes);
    for (const { key, field } of block.settings) putField(packets, field, valueOf(key), data);
    return data;
  }

  function planReads(keys: readonly NativeKey[], values: NativeValues = {}): readonly WireRequest[] {
    const wanted = new Set(keys);
    const asked = new Set(keys.flatMap((key) => blocks.ofKey.get(key) ?? []));
    return blocks.all.filter((block) => asked.has(block)).map((block) => {
      const members = block.settings.filter(({ key, readable }) => readable && wanted.has(key));
      const reply = (data: Uint8Array): Match => ({ kind: "reply", values: Object.fromEntries(members.map(({ key, field }) => [key, takeField(packets, field, data)])), fields: {} });
      const expected = blockData(block, (key) => values[key] ?? initial.get(key) ?? 0);
      return request(READ_BLOCK, block, new Uint8Array(0), expected, { label: `read ${block.name}`, extraMs: 0, idempotent: true, keys: members.map(({ key }) => key) }, reply);
    });
  }

  function planWrite(writes: readonly NativeWrite[]): Result<WireRequest, string> {
    const given = new Map(writes.map(({ key, value }) => [key, value]));
    const [block, ...more] = new Set(writes.flatMap(({ key }) => blocks.ofKey.get(key) ?? []));
    if (!block || more.length > 0) return fail("One request of this device writes one block.");
    const missing = block.settings.find(({ key, writable }) => !writable || !given.has(key));
    if (missing) return fail(`The block ${block.name} is written whole, and ${missing.key} is not given.`);
    const data = blockData(block, (key) => given.get(key) ?? 0);
    const about = { label: `write ${block.name}`, extraMs: pace.writeSettleMs, idempotent: false, keys: [...given.keys()] };
    return ok(request(WRITE_BLOCK, block, data, new Uint8Array(0), about, () => ({ kind: "reply", values: Object.fromEntries(given), fields: {} })));
  }

  /** The block that an operation's fields lie in. `compileBlocks` has seen that it is one, and stands once. */
  function placeOf(wire: OperationWire | undefined) {
    if (wire?.kind !== "packet") return null;
    const block = packets.blocks.find(({ name }) => name === wire.fields[0]?.field.block);
    return block ? { fields: wire.fields, value: wire.value, number: block.number, repeat: 0, bytes: block.bytes } : null;
  }

  return ok({
    kind: "packet",
    silenceMs: 0,
    planReads,
    planWrite,
    planStatus(name) {
      const place = placeOf(definition.status[name]);
      if (!place) return null;
      const reply = (data: Uint8Array): Match => ({ kind: "reply", values: {}, fields: Object.fromEntries(place.fields.map((one) => [one.name, takeField(packets, one.field, data)])) });
      return request(READ_BLOCK, place, new Uint8Array(0), new Uint8Array(place.bytes), { label: `read ${name}`, extraMs: 0, idempotent: true, keys: [] }, reply);
    },
    planAction(name, given: Fields) {
      const place = placeOf(definition.actions[name]);
      if (!place) return null;
      const data = new Uint8Array(place.bytes);
      for (const one of place.fields) putField(packets, one.field, given[one.name] ?? place.value ?? 0, data);
      const extraMs = name === "commit" ? definition.memory.commitTakesMs : 0;
      return request(WRITE_BLOCK, place, data, new Uint8Array(0), { label: name, extraMs, idempotent: false, keys: [] }, () => ({ kind: "reply", values: {}, fields: given }));
    },
    createDecoder: () => createPacketDecoder(packets),
    isEcho: (frame, sent) => frame.bytes.length === sent.bytes.length && frame.bytes.every((byte, index) => byte === sent.bytes[index]),
    strikeOut(bytes) {
      const payload = openPacket(packets, bytes);
      if (!payload) return crossOutBytes(bytes);
      const secrets = [...blocks.all.filter((block) => block.number === payload[1] && block.repeat === payload[2])].flatMap((block) => block.settings).filter(({ field }) => field.encoding === "ascii").map(({ field }) => field);
      const identity = placeOf(definition.status.identity);
      if (identity && identity.number === payload[1]) secrets.push(...identity.fields.filter(({ name }) => name === "serial").map(({ field }) => field));
      const crossed = payload.slice();
      for (const { byteOffset, bytes: length } of secrets) {
        const [begin, end] = [3 + byteOffset, 3 + byteOffset + length];
        if (end <= crossed.length) crossed.set(crossOutBytes(crossed.subarray(begin, end)), begin);
      }
      return sealPacket(packets, [...crossed]);
    },
  });
}
