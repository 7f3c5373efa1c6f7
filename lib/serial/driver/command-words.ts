import { hexOf, printable } from "@/lib/serial/wire-log";
import type { NativeValue, NativeValues } from "@/lib/serial/native";
import type { CompiledDriver, Fields, Match, WireRequest } from "./compiled";
import type { ActionName, StatusName } from "./definition";

/** A command of a driver, as an editor lists them. */
export type Command =
  | { readonly kind: "read"; readonly key: string }
  | { readonly kind: "write"; readonly key: string; readonly value: NativeValue }
  | { readonly kind: "status"; readonly name: StatusName }
  | { readonly kind: "action"; readonly name: ActionName; readonly fields: Fields };

/** What a command puts on the line. */
export type CommandBytes = { readonly request: WireRequest; readonly hex: string; readonly text: string; readonly replyBytes: number };

function requestOf(driver: CompiledDriver, command: Command): WireRequest | string {
  const { codec, byKey, settings } = driver;
  switch (command.kind) {
    case "read":
      return codec.planReads([command.key])[0] ?? `The driver has no way to read ${command.key}.`;
    case "status":
      return codec.planStatus(command.name) ?? `The driver has no query ${command.name}.`;
    case "action":
      return codec.planAction(command.name, command.fields) ?? `The driver has no order ${command.name}.`;
    case "write": {
      const setting = byKey.get(command.key);
      if (!setting) return `The driver has no setting ${command.key}.`;
      // A block is written whole: its other settings stand as a new device has them.
      const { wire } = setting.source;
      const block = wire.kind === "packet" ? wire.field.block : null;
      const together = block === null ? [setting] : settings.filter(({ source, number, writable }) => writable && source.wire.kind === "packet" && source.wire.field.block === block && number === setting.number);
      const planned = codec.planWrite(together.map(({ key, initial }) => ({ key, value: key === command.key ? command.value : initial })));
      return planned.ok ? planned.value : planned.error;
    }
  }
}

/**
 * The bytes that a driver makes of a command.
 * @returns or why it makes none, in one sentence
 */
export function commandBytes(driver: CompiledDriver, command: Command): CommandBytes | string {
  const request = requestOf(driver, command);
  return typeof request === "string" ? request : { request, hex: hexOf(request.bytes), text: printable(request.bytes), replyBytes: request.replyBytes };
}

/** Every command of a driver once, with slots and modes at their first number and settings at their new value. */
export function commandsOf({ definition, settings }: CompiledDriver): readonly Command[] {
  const firsts = [...new Map([...settings].reverse().map((setting) => [setting.pattern, setting])).values()].reverse();
  const argument = { slot: definition.slots.first, seconds: 30 };
  return [
    // The keys of the definition's records are its status and action names.
    ...(Object.keys(definition.status) as StatusName[]).map((name): Command => ({ kind: "status", name })),
    ...(Object.keys(definition.actions) as ActionName[]).map((name): Command => ({ kind: "action", name, fields: argument })),
    ...firsts.flatMap(({ key, initial, readable, writable }): Command[] => [
      ...(readable ? [{ kind: "read", key } as const] : []), ...(writable ? [{ kind: "write", key, value: initial } as const] : []),
    ]),
  ];
}

/** Longest reply that is pasted. */
const MAX_PASTED = 8192;

/**
 * The bytes of a pasted reply: hex pairs (with spaces, commas, `0x`) or a text, in which `\n`, `\r` and `\xNN` stand for bytes.
 * A line end that a text lacks is put there by the caller.
 * @returns or what is wrong, in one sentence
 */
export function pastedBytes(pasted: string, as: "hex" | "text"): Uint8Array | string {
  if (pasted.length > MAX_PASTED) return `At most ${MAX_PASTED} characters are read.`;
  if (as === "text") {
    const bytes: number[] = [];
    const encoder = new TextEncoder();
    for (const [part] of pasted.matchAll(/\\x[0-9A-Fa-f]{2}|\\[nr\\]|[^\\]+|\\/gu)) {
      if (part === "\\n") bytes.push(10);
      else if (part === "\\r") bytes.push(13);
      else if (part === "\\\\") bytes.push(92);
      else if (part.startsWith("\\x")) bytes.push(Number.parseInt(part.slice(2), 16));
      else bytes.push(...encoder.encode(part));
    }
    return Uint8Array.from(bytes);
  }
  const digits = pasted.replace(/0x/giu, "").replace(/[\s,;:-]/gu, "");
  if (!/^[0-9A-Fa-f]*$/u.test(digits)) return "This is not hex: pairs of the digits 0 to 9 and A to F are read.";
  if (digits.length % 2 !== 0) return "The last pair has one digit.";
  return Uint8Array.from({ length: digits.length / 2 }, (_, index) => Number.parseInt(digits.slice(2 * index, 2 * index + 2), 16));
}

/** How one frame of a pasted reply is read: what it is to the command, or why it is no frame. */
export type ReadFrame = { readonly hex: string; readonly text: string; readonly match: Match | { readonly kind: "noise"; readonly why: string } };
export type ReadReply = { readonly frames: readonly ReadFrame[]; /** What is read out of it. */ readonly values: NativeValues; readonly fields: Fields };

const WHY: Readonly<Record<string, string>> = {
  check: "its check is wrong", "too-long": "it is longer than the protocol allows", "not-text": "it is not UTF-8 text", "no-check": "it has no check", "cut-short": "it ends in the middle",
};

/** How a driver reads bytes as the reply to a command. */
export function readReply(driver: CompiledDriver, request: WireRequest, bytes: Uint8Array): ReadReply {
  const decoder = driver.codec.createDecoder();
  const frames = [...decoder.push(bytes), ...decoder.flush()].map((frame): ReadFrame => ({
    hex: hexOf(frame.bytes), text: printable(frame.bytes),
    match: frame.kind === "noise" ? { kind: "noise", why: WHY[frame.why] ?? frame.why } : request.match(frame),
  }));
  const replies = frames.flatMap(({ match }) => (match.kind === "reply" ? [match] : []));
  return { frames, values: Object.assign({}, ...replies.map(({ values }) => values)) as NativeValues, fields: Object.assign({}, ...replies.map(({ fields }) => fields)) as Fields };
}
