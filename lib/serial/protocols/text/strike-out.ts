import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeKey } from "@/lib/serial/native";
import type { TextExchanges } from "./exchanges";
import { encodeLine, openLine, readLine, type TextProtocol } from "./line";
import { fillTemplate, leadOf, parseTemplate, type Template } from "./template";

const crossedOut = (text: string) => "x".repeat(text.length);

/** Letters and digits of bytes that make no line: a name may be cut anywhere in them. */
function crossOutBytes(bytes: Uint8Array): Uint8Array {
  return bytes.map((byte) => (/[A-Za-z0-9]/u.test(String.fromCharCode(byte)) || byte > 127 ? 0x78 : byte));
}

/** The template that begins the line, the longest beginning first. At most one look-up a character. */
function templateOf(templates: ReadonlyMap<string, Template>, body: string): Template | undefined {
  for (let length = body.length; length > 0; length -= 1) {
    const template = templates.get(body.slice(0, length));
    if (template) return template;
  }
  return undefined;
}

/** Makes the function that takes names and serial numbers out of a line; length and form stay, the check is renewed. */
export function createStrikeOut(
  definition: DriverDefinition, protocol: TextProtocol, { reads, writes, statuses }: TextExchanges, byKey: ReadonlyMap<NativeKey, CompiledSetting>,
): (bytes: Uint8Array, request?: Uint8Array) => Uint8Array {
  const named = new Map<string, Template>();
  for (const group of [reads, writes]) {
    for (const [key, { request, reply }] of group) {
      if (byKey.get(key)?.value.type !== "text") continue;
      for (const template of [request, reply]) if (template.holes.length > 0) named.set(leadOf(template), template);
    }
  }
  const identity = statuses.get("identity");

  function strike(body: string, answersIdentity: boolean): string {
    const template = templateOf(named, body);
    const fields = template && parseTemplate(template, body);
    if (template && fields) {
      return fillTemplate(template, Object.fromEntries(Object.entries(fields).map(([name, value]) => [name, typeof value === "string" ? crossedOut(value) : value])));
    }
    const told = identity && parseTemplate(identity.reply, body);
    if (!told || !(answersIdentity || told["maker"] === definition.maker)) return body;
    return fillTemplate(identity.reply, { ...told, serial: crossedOut(String(told["serial"] ?? "")) });
  }

  return (bytes, request) => {
    const line = readLine(protocol, bytes);
    const { body, check } = openLine(protocol, line ?? "");
    const isLine = line !== null && new TextDecoder().decode(bytes).endsWith(protocol.lineEnd) && (check === "right" || !protocol.check?.requiredInReplies);
    if (!isLine) return crossOutBytes(bytes);
    const asked = request && readLine(protocol, request);
    const answersIdentity = identity !== undefined && asked !== undefined && asked !== null && openLine(protocol, asked).body === fillTemplate(identity.request, {});
    return encodeLine(protocol, strike(body, answersIdentity), check === "right");
  };
}
