import type { NativeValue } from "@/lib/serial/native";
import { nativeProblem } from "@/lib/serial/driver/compile";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { commandBytes, commandsOf, pastedBytes, readReply } from "@/lib/serial/driver/command-words";
import type { Command, CommandBytes, ReadFrame, ReadReply } from "@/lib/serial/driver/command-words";

/** Commands that are shown at once; a filter leads to the others. */
export const MAX_SHOWN = 150;

export type CommandRow = {
  readonly id: string;
  readonly words: string;
  readonly command: Command;
  readonly made: CommandBytes | string;
};

/** A command in a word or two, by which it is found again after the text has changed. */
export function commandId(command: Command): string {
  switch (command.kind) {
    case "read":
    case "write":
      return `${command.kind} ${command.key}`;
    case "status":
      return `ask ${command.name}`;
    case "action":
      return `order ${command.name}`;
  }
}

/** The commands of a driver with their bytes, `MAX_SHOWN` of those that have all words of the filter, and how many there are. */
export function commandRows(driver: CompiledDriver, filter: string): { readonly rows: readonly CommandRow[]; readonly total: number } {
  const wanted = filter.toLowerCase().split(/\s+/u).filter((word) => word !== "");
  const found = commandsOf(driver)
    .map((command) => ({ command, id: commandId(command) }))
    .filter(({ id }) => wanted.every((word) => id.toLowerCase().includes(word)));
  const rows = found.slice(0, MAX_SHOWN).map(({ command, id }) => ({ command, id, words: id, made: commandBytes(driver, command) }));
  return { rows, total: found.length };
}

/** A typed example value as the setting holds it: a whole number where it wants one. */
function nativeOf(typed: string, before: NativeValue): NativeValue {
  return typeof before === "number" && /^-?\d+$/u.test(typed.trim()) ? Number(typed) : typed;
}

/** The command with the value that was typed in place of its example. */
export function withValue(command: Command, typed: string): Command {
  if (typed === "") return command;
  if (command.kind === "write") return { ...command, value: nativeOf(typed, command.value) };
  if (command.kind !== "action") return command;
  const fields = Object.fromEntries(Object.entries(command.fields).map(([name, value]) => [name, nativeOf(typed, value)]));
  return { ...command, fields };
}

/** Why the setting cannot hold the value of a command, in a sentence. Null: it can, or it is no write. */
export function valueProblem({ byKey }: CompiledDriver, command: Command): string | null {
  const setting = command.kind === "write" ? byKey.get(command.key) : undefined;
  const problem = setting && command.kind === "write" ? nativeProblem(setting.value, command.value) : null;
  return problem === null ? null : `No run sends this: ${/^(?:is|has) /u.test(problem) ? `it ${problem}` : problem}.`;
}

const LINE_END = /[\r\n]$/u;

/** The bytes of a pasted reply; a text line gets the end that the protocol asks for. */
function replyBytes(driver: CompiledDriver, pasted: string, as: "hex" | "text"): Uint8Array | string {
  const { protocol } = driver.definition;
  const needsEnd = as === "text" && protocol.kind === "text" && !LINE_END.test(pasted) && !/\\[rn]$/u.test(pasted);
  return pastedBytes(needsEnd ? `${pasted}${protocol.kind === "text" ? protocol.lineEnd : ""}` : pasted, as);
}

/** How a pasted reply is read as the answer to a command, or what is wrong with what was pasted. */
export function readPasted(driver: CompiledDriver, made: CommandBytes, pasted: string, as: "hex" | "text"): ReadReply | string {
  const bytes = replyBytes(driver, pasted, as);
  return typeof bytes === "string" ? bytes : readReply(driver, made.request, bytes);
}

/** What one frame of a reply is to the command, in a sentence. */
export function frameWords({ match }: ReadFrame): string {
  switch (match.kind) {
    case "reply":
      return "This is the answer.";
    case "refused":
      return `The device refuses: ${match.message}`;
    case "busy":
      return "The device is busy.";
    case "malformed":
      return `It answers, and cannot be read: ${match.message}`;
    case "noise":
      return `It is no frame: ${match.why}.`;
    case "other":
      return "It answers something else.";
  }
}
