import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting, Fields, Frame, Match, ProtocolCodec, WireRequest } from "@/lib/serial/driver/compiled";
import type { ActionName, DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValues, NativeWrite } from "@/lib/serial/native";
import { checkField, createLineDecoder, encodeLine, type TextProtocol } from "./line";
import { compileExchanges, type BoundExchange, type SettingExchange, type TextExchanges } from "./exchanges";
import { createStrikeOut } from "./strike-out";
import { compileTemplate, fillTemplate, parseTemplate, type Template } from "./template";

const TEXT = new TextEncoder();
const OTHER: Match = { kind: "other" };

/** Orders that may be given again when their answer was lost: what they do does not add up. */
const REPEATABLE: readonly ActionName[] = ["armTimer", "extendTimer", "confirmTimer", "disarmTimer"];

type Complaints = { readonly refusal: Template | null; readonly busy: Template | null };

/** The device said no, or not now, to the request with this header. */
function matchComplaint(complaints: Complaints, header: string, text: string): Match {
  const busy = complaints.busy && parseTemplate(complaints.busy, text);
  if (busy && busy["header"] === header) return { kind: "busy" };
  const refusal = complaints.refusal && parseTemplate(complaints.refusal, text);
  if (!refusal || refusal["header"] !== header) return OTHER;
  const { code, message } = refusal;
  return { kind: "refused", message: [message, code === undefined ? "" : `(${code})`].filter(Boolean).join(" ") || "no reason given" };
}

function matchReply(exchange: BoundExchange, complaints: Complaints, frame: Frame): Match | Fields {
  if (frame.kind === "noise") return OTHER;
  const fields = parseTemplate(exchange.reply, frame.text);
  if (fields) return fields;
  if (exchange.tag !== "" && frame.text.startsWith(exchange.tag)) return { kind: "malformed", message: `“${frame.text}” is not what ${exchange.header} answers` };
  return matchComplaint(complaints, exchange.header, frame.text);
}

const isMatch = (found: Match | Fields): found is Match => typeof found["kind"] === "string";

/** Host side of the text protocol. Errors: path and sentence for each template that cannot work. */
export function createTextCodec(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<ProtocolCodec, PathMessage[]> {
  if (definition.protocol.kind !== "text") return fail([{ path: "protocol.kind", message: "is not text" }]);
  const protocol: TextProtocol = definition.protocol;
  const exchanges = compileExchanges(definition, settings);
  if (!exchanges.ok) return exchanges;
  const complaints = compileComplaints(protocol);
  if (!complaints.ok) return complaints;
  return ok(textCodec(definition, protocol, exchanges.value, complaints.value, new Map(settings.map((setting) => [setting.key, setting]))));
}

function compileComplaints(protocol: TextProtocol): Result<Complaints, PathMessage[]> {
  const problems: PathMessage[] = [];
  const compiled = { refusal: null as Template | null, busy: null as Template | null };
  for (const [name, source] of [["refusal", protocol.refusalReply], ["busy", protocol.busyReply]] as const) {
    if (source === undefined) continue;
    const template = compileTemplate(source);
    if (!template.ok) problems.push({ path: `protocol.${name}Reply`, message: template.error });
    else if (!template.value.holes.some((hole) => hole.name === "header")) problems.push({ path: `protocol.${name}Reply`, message: "wants {header:…}, or it could not be told what it answers" });
    else compiled[name] = template.value;
  }
  return problems.length > 0 ? fail(problems) : ok(compiled);
}

function textCodec(
  definition: DriverDefinition, protocol: TextProtocol, exchanges: TextExchanges, complaints: Complaints, byKey: ReadonlyMap<NativeKey, CompiledSetting>,
): ProtocolCodec {
  const frameBytes = checkField(protocol, "").length + TEXT.encode(protocol.lineEnd).length;
  const lengthOf = (template: Template, fields: Fields) => TEXT.encode(fillTemplate(template, fields)).length + frameBytes;

  function request(body: string, exchange: BoundExchange, about: Pick<WireRequest, "replyBytes" | "extraMs" | "idempotent" | "keys">, reply: (fields: Fields) => Match, named: boolean): WireRequest {
    return {
      label: body, bytes: encodeLine(protocol, body), named: named && exchange.tag !== "", ...about,
      match(frame) {
        const found = matchReply(exchange, complaints, frame);
        return isMatch(found) ? found : reply(found);
      },
    };
  }

  function valueRequest(key: NativeKey, exchange: SettingExchange, body: string, replyBytes: number, reads: boolean): WireRequest {
    const reply = (fields: Fields): Match => ({ kind: "reply", values: { [key]: fields[exchange.replyHole] ?? "" }, fields });
    const extraMs = reads ? 0 : definition.pace.writeSettleMs;
    return request(body, exchange, { replyBytes, extraMs, idempotent: reads, keys: [key] }, reply, reads);
  }

  function planReads(keys: readonly NativeKey[], values: NativeValues = {}): readonly WireRequest[] {
    return keys.flatMap((key) => {
      const exchange = exchanges.reads.get(key);
      if (!exchange) return [];
      const value = values[key] ?? byKey.get(key)?.initial ?? "";
      return [valueRequest(key, exchange, fillTemplate(exchange.request, {}), lengthOf(exchange.reply, { [exchange.replyHole]: value }), true)];
    });
  }

  function planWrite(writes: readonly NativeWrite[]): Result<WireRequest, string> {
    const [write, ...more] = writes;
    if (!write || more.length > 0) return fail("One request of this device writes one setting.");
    const exchange = exchanges.writes.get(write.key);
    if (!exchange || exchange.requestHole === null) return fail(`The driver has no way to write ${write.key}.`);
    const body = fillTemplate(exchange.request, { [exchange.requestHole]: write.value });
    return ok(valueRequest(write.key, exchange, body, lengthOf(exchange.reply, { [exchange.replyHole]: write.value }), false));
  }

  function plainRequest(exchange: BoundExchange, fields: Fields, extraMs: number, idempotent: boolean, named: boolean, answer = fields): WireRequest {
    // A reply's length is known where it repeats what was asked, or is foreseen; else its text with empty holes stands for it.
    const known = Object.fromEntries(exchange.reply.holes.map((hole) => [hole.name, answer[hole.name] ?? ""]));
    const about = { replyBytes: lengthOf(exchange.reply, known), extraMs, idempotent, keys: [] };
    return request(fillTemplate(exchange.request, fields), exchange, about, (found) => ({ kind: "reply", values: {}, fields: found }), named);
  }

  return {
    kind: "text",
    silenceMs: 0,
    planReads,
    planWrite,
    planStatus(name, answer) {
      const exchange = exchanges.statuses.get(name);
      return exchange ? plainRequest(exchange, {}, 0, true, true, answer) : null;
    },
    planAction(name, fields) {
      const exchange = exchanges.actions.get(name);
      return exchange ? plainRequest(exchange, fields, name === "commit" ? definition.memory.commitTakesMs : 0, REPEATABLE.includes(name), false) : null;
    },
    createDecoder: () => createLineDecoder(protocol),
    strikeOut: createStrikeOut(definition, protocol, exchanges, byKey),
    isEcho: (frame, sent) => frame.bytes.length === sent.bytes.length && frame.bytes.every((byte, index) => byte === sent.bytes[index]),
  };
}
