import type { PathMessage } from "@/lib/result";
import { compileTemplate } from "@/lib/serial/protocols/text/template";
import type { ActionName, DriverDefinition, OperationWire, StatusName } from "./definition";

/** Fields that the answer to each query must have; what it has beyond them is passed over. See `operationWireSchema`. */
const ANSWERS: Readonly<Record<StatusName, readonly string[]>> = {
  identity: ["maker", "model", "firmware"], activeSlot: ["slot"], bootCount: ["count"], committed: ["committed"],
  rasterOut: ["clock", "hActive", "hFrontPorch", "hSync", "hBackPorch", "hPolarity", "vActive", "vFrontPorch", "vSync", "vBackPorch", "vPolarity", "scan"],
  arriving: ["input", "activePx", "activeLines", "interlaced", "fieldRateMilliHz", "locked"],
  errorQueue: ["code", "message"], operationComplete: ["complete"],
};

/** The argument of each order. */
const ARGUMENTS: Readonly<Record<ActionName, string | null>> = {
  recall: "slot", commit: null, armTimer: "seconds", extendTimer: "seconds", confirmTimer: null, disarmTimer: null, muteOn: null, muteOff: null,
};

function holesOf(template: string): readonly string[] | null {
  const compiled = compileTemplate(template);
  return compiled.ok ? compiled.value.holes.map(({ name }) => name) : null;
}

function statusProblems(name: StatusName, wire: OperationWire): PathMessage[] {
  const path = `status.${name}`;
  const fields = wire.kind === "text" ? holesOf(wire.reply) : wire.fields.map((field) => field.name);
  if (fields === null) return [];
  const missing = ANSWERS[name].filter((field) => !fields.includes(field));
  const problems = missing.length > 0 ? [{ path: wire.kind === "text" ? `${path}.reply` : `${path}.fields`, message: `does not say ${missing.join(", ")}` }] : [];
  const asked = wire.kind === "text" ? (holesOf(wire.request) ?? []) : [];
  return asked.length === 0 ? problems : [...problems, { path: `${path}.request`, message: `is a query without arguments, so {${asked[0]}} has no value` }];
}

function actionProblems(name: ActionName, wire: OperationWire): PathMessage[] {
  const path = `actions.${name}`;
  const argument = ARGUMENTS[name];
  if (wire.kind === "text") {
    const holes = holesOf(wire.request);
    const stray = holes?.find((hole) => hole !== argument);
    if (stray !== undefined) return [{ path: `${path}.request`, message: `{${stray}} has no value: ${argument === null ? "this order has no argument" : `its argument is {${argument}:int}`}` }];
    return argument !== null && holes?.length === 0 ? [{ path: `${path}.request`, message: `does not say {${argument}:int}` }] : [];
  }
  if (wire.kind === "modbus" && wire.fields.length > 1) return [{ path: `${path}.fields`, message: "is written into one register field" }];
  const named = wire.fields.some((field) => field.name === argument);
  if (argument !== null) return named ? [] : [{ path: `${path}.fields`, message: `has no field ${argument}` }];
  return wire.value === undefined ? [{ path: `${path}.value`, message: "is missing: this order has no argument, so it says what is written" }] : [];
}

/** What the queries and orders of a definition cannot do: fields that are missing, and arguments that nobody gives. */
export function operationProblems({ status, actions }: DriverDefinition): PathMessage[] {
  // Object.entries widens the keys of a partial record to string.
  const statuses = Object.entries(status) as [StatusName, OperationWire | undefined][];
  const orders = Object.entries(actions) as [ActionName, OperationWire | undefined][];
  return [
    ...statuses.flatMap(([name, wire]) => (wire ? statusProblems(name, wire) : [])),
    ...orders.flatMap(([name, wire]) => (wire ? actionProblems(name, wire) : [])),
  ];
}
