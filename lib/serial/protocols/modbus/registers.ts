import type { ModbusField } from "@/lib/serial/driver/definition";
import type { NativeValue } from "@/lib/serial/native";
import { fromBytes, toBytes } from "@/lib/serial/protocols/integer-bytes";

/** A field at its registers: `first` and the `words` after it. */
export type PlacedField = { readonly field: ModbusField; readonly first: number };

/** @param index which slot or mode, counted from 0 */
export function placeField(field: ModbusField, index: number): PlacedField {
  return { field, first: field.register + index * field.stride };
}

export const endOf = ({ field, first }: PlacedField) => first + field.words;

/** Bytes of a value in register order, each register high byte first. */
export function encodeField(field: ModbusField, value: NativeValue): Uint8Array {
  const bytes = toBytes(value, field.words * 2, field.encoding);
  return field.encoding === "integer" && field.wordOrder === "low-first" ? swapWords(bytes) : bytes;
}

/** The value of a field in the registers from `start` on. */
export function decodeField({ field, first }: PlacedField, registers: Uint8Array, start: number): NativeValue {
  const bytes = registers.subarray((first - start) * 2, (first - start + field.words) * 2);
  return fromBytes(field.encoding === "integer" && field.wordOrder === "low-first" ? swapWords(bytes) : bytes, field.encoding, field.signed);
}

function swapWords(bytes: Uint8Array): Uint8Array {
  const swapped = new Uint8Array(bytes.length);
  for (let at = 0; at < bytes.length; at += 2) swapped.set(bytes.subarray(at, at + 2), bytes.length - at - 2);
  return swapped;
}

/** One read: the registers from `first`, `count` of them, and the fields in it (by index into what was asked). */
export type ReadSpan = { readonly table: ModbusField["table"]; readonly first: number; readonly count: number; readonly members: readonly number[] };

/**
 * The spans that read every field once in the least time: the best of all ways to cut the sorted fields, not the fewest pieces.
 * @param overheadRegisters what one more request costs, in registers' time
 * @param maxGap registers between two fields that a read may take along
 * @param most registers in one read
 */
export function bestSpans(fields: readonly PlacedField[], { overheadRegisters, maxGap, most }: { overheadRegisters: number; maxGap: number; most: number }): ReadSpan[] {
  return (["holding", "input"] as const).flatMap((table) => {
    const sorted = fields.map((placed, index) => ({ ...placed, index })).filter(({ field }) => field.table === table).sort((a, b) => a.first - b.first || endOf(a) - endOf(b));
    // cost[i]: least cost of reading the first i fields; from[i]: where the last span of that begins.
    const cost = [0];
    const from = [0];
    for (let end = 1; end <= sorted.length; end += 1) {
      const last = sorted[end - 1];
      cost[end] = Infinity;
      for (let begin = end - 1; last && begin >= 0; begin -= 1) {
        const first = sorted[begin];
        const next = sorted[begin + 1];
        if (!first || (begin < end - 1 && next && next.first - endOf(first) > maxGap)) break;
        const count = Math.max(...[last, first].map(endOf)) - first.first;
        if (count > most) break;
        const total = (cost[begin] ?? Infinity) + overheadRegisters + count;
        if (total < (cost[end] ?? Infinity)) {
          cost[end] = total;
          from[end] = begin;
        }
      }
    }
    const spans: ReadSpan[] = [];
    for (let end = sorted.length; end > 0; end = from[end] ?? 0) {
      const members = sorted.slice(from[end] ?? 0, end);
      const first = members[0]?.first ?? 0;
      spans.unshift({ table, first, count: Math.max(...members.map(endOf)) - first, members: members.map(({ index }) => index) });
    }
    return spans;
  });
}
