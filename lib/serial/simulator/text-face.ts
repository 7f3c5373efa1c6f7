import type { CompiledDriver, Fields } from "@/lib/serial/driver/compiled";
import type { NativeValue } from "@/lib/serial/native";
import { compileExchanges, type BoundExchange, type TextExchanges } from "@/lib/serial/protocols/text/exchanges";
import { createLineSplitter, encodeLine, openLine, readLine, type TextProtocol } from "@/lib/serial/protocols/text/line";
import { compileTemplate, fillTemplate, leadOf, parseTemplate, type Template } from "@/lib/serial/protocols/text/template";
import type { FaceMaker } from "./device-face";
import type { DeviceAnswer, DeviceOperation } from "./device-operations";
import { createWorkQueue } from "./work-queue";

/** Errors that wait to be asked for; the last place says that there were more. SCPI: −350, queue overflow. */
const MAX_ERRORS = 16;

type Command = { readonly exchange: BoundExchange; readonly operationOf: (fields: Fields) => DeviceOperation; readonly replyOf: (answer: Fields, asked: Fields, values: Fields) => Fields };

/** Every command of the device by the text that its request begins with. */
function commandsOf({ reads, writes, statuses, actions }: TextExchanges): ReadonlyMap<string, Command> {
  const commands = new Map<string, Command>();
  const plain = (answer: Fields, asked: Fields): Fields => ({ ...asked, ...answer });
  for (const [key, exchange] of reads) {
    commands.set(leadOf(exchange.request), {
      exchange, operationOf: () => ({ kind: "read", keys: [key] }), replyOf: (_answer, _asked, values) => ({ [exchange.replyHole]: values[key] ?? "" }),
    });
  }
  for (const [key, exchange] of writes) {
    const asked = (fields: Fields): NativeValue => fields[exchange.requestHole ?? ""] ?? "";
    commands.set(leadOf(exchange.request), {
      exchange, operationOf: (fields) => ({ kind: "write", writes: [{ key, value: asked(fields) }] }), replyOf: (_answer, fields) => ({ [exchange.replyHole]: asked(fields) }),
    });
  }
  for (const [name, exchange] of statuses) commands.set(leadOf(exchange.request), { exchange, operationOf: () => ({ kind: "status", name }), replyOf: plain });
  for (const [name, exchange] of actions) commands.set(leadOf(exchange.request), { exchange, operationOf: (fields) => ({ kind: "action", name, fields }), replyOf: plain });
  return commands;
}

const commandsByDriver = new WeakMap<CompiledDriver, ReadonlyMap<string, Command>>();

/** The commands of a driver, worked out once. */
function commandsFor(driver: CompiledDriver): ReadonlyMap<string, Command> {
  const known = commandsByDriver.get(driver);
  if (known) return known;
  const compiled = compileExchanges(driver.definition, driver.settings);
  if (!compiled.ok) throw new Error("A compiled driver has exchanges that compile");
  const commands = commandsOf(compiled.value);
  commandsByDriver.set(driver, commands);
  return commands;
}

/** The command whose request begins the line; the longest beginning wins. At most one look-up a character. */
function findCommand(commands: ReadonlyMap<string, Command>, body: string): Command | undefined {
  for (let length = body.length; length > 0; length -= 1) {
    const command = commands.get(body.slice(0, length));
    if (command) return command;
  }
  return undefined;
}

function complaintTemplate(source: string | undefined): Template | null {
  const compiled = source === undefined ? null : compileTemplate(source);
  return compiled?.ok ? compiled.value : null;
}

/** Fills a reply; a hole that a device made from a driver knows nothing of is blank. */
function answerText(template: Template, fields: Fields): string {
  const blank = Object.fromEntries(template.holes.map((hole) => [hole.name, hole.type === "number" ? 0 : hole.type === "word" ? "-" : ""]));
  return fillTemplate(template, { ...blank, ...fields });
}

/** SCPI's error queue: first in, first out, "No error" when empty. */
function createErrorQueue() {
  const errors: { code: number; message: string }[] = [];
  return {
    add(code: number, message: string) {
      if (errors.length < MAX_ERRORS) errors.push({ code, message });
      else errors[MAX_ERRORS - 1] = { code: -350, message: "Queue overflow" };
    },
    take: () => errors.shift() ?? { code: 0, message: "No error" },
    clear: () => void errors.splice(0),
  };
}

/** The device's side of the text protocol. A line that it cannot take gets no answer, only an entry in the error queue. */
export const createTextFace: FaceMaker = ({ driver, clock, perform, send }) => {
  const { protocol, pace, memory } = driver.definition;
  if (protocol.kind !== "text") throw new Error("A text face needs a text driver");
  const text: TextProtocol = protocol;
  const commands = commandsFor(driver);
  const refusal = complaintTemplate(text.refusalReply);
  const busy = complaintTemplate(text.busyReply);
  const splitter = createLineSplitter(text);
  const work = createWorkQueue(clock);
  const errors = createErrorQueue();

  const say = (body: string, checked: boolean) => send(encodeLine(text, body, checked));

  function answerOf(operation: DeviceOperation): DeviceAnswer {
    if (operation.kind === "status" && operation.name === "errorQueue") return { kind: "values", values: {}, fields: errors.take() };
    return perform(operation);
  }

  function serve({ exchange, operationOf, replyOf }: Command, asked: Fields, checked: boolean): void {
    const answer = answerOf(operationOf(asked));
    if (answer.kind === "values") say(answerText(exchange.reply, replyOf(answer.fields, asked, answer.values)), checked);
    else if (answer.kind === "busy" && busy) say(answerText(busy, { header: exchange.header }), checked);
    else if (answer.kind === "refused") {
      errors.add(answer.code, answer.message);
      if (refusal) say(answerText(refusal, { header: exchange.header, code: answer.code, message: answer.message }), checked);
    }
  }

  function workMs(operation: DeviceOperation): number {
    if (operation.kind === "write") return pace.workMs + pace.writeSettleMs;
    return pace.workMs + (operation.kind === "action" && operation.name === "commit" ? memory.commitTakesMs : 0);
  }

  function take(line: string): void {
    const { body, check } = openLine(text, line);
    if (check === "wrong") return errors.add(202, "Check wrong");
    const command = findCommand(commands, body);
    const asked = command ? parseTemplate(command.exchange.request, body) : null;
    if (!command || !asked) return body === "" ? undefined : errors.add(command ? -104 : -113, command ? "Data type error" : "Undefined header");
    if (check === "none" && text.check && !text.uncheckedRequests.includes(body)) return errors.add(201, "Check missing");
    if (text.echo) say(body, check === "right");
    const taken = work.add(workMs(command.operationOf(asked)), () => serve(command, asked, check === "right"));
    if (!taken) errors.add(-363, "Input buffer overrun");
  }

  return {
    receive(bytes) {
      for (const piece of splitter.push(bytes)) {
        const line = piece.whole ? readLine(text, piece.bytes) : null;
        if (line === null) errors.add(-102, "Syntax error");
        else take(line);
      }
    },
    reset() {
      splitter.flush();
      work.clear();
      errors.clear();
    },
    chatter: (line) => encodeLine(text, line, false),
  };
};
