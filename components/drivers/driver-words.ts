import { formatCount, formatFigure, formatNumber, formatSpan } from "@/components/ui/figures";
import type { FindingSeverity } from "@/components/ui/finding-icon";
import type { DriverVersionView } from "@/lib/contracts/driver";
import type { SectionName } from "@/lib/serial/conformance/report";
import type { DriverDefinition, DriverSetting, SettingValue } from "@/lib/serial/driver/definition";

/** A fact with its name, as a row. */
export type Fact = { readonly name: string; readonly words: string };

const protocols: Readonly<Record<string, string>> = {
  text: "Lines of text",
  "modbus-rtu": "Modbus RTU",
  packet: "Packets",
};

/** A protocol by its kind in a definition. */
export function protocolWords(kind: string): string {
  return protocols[kind] ?? kind;
}

/** "1.0 to 3.4", or the one version that it is for. */
export function firmwareWords({ min, max }: { readonly min: string; readonly max: string }): string {
  return min === max ? min : `${min} to ${max}`;
}

export const stateWords: Readonly<Record<DriverVersionView["state"], string>> = {
  draft: "draft",
  conformance: "candidate",
  published: "published",
  withdrawn: "withdrawn",
};

/** What a report says in a word, and how it stands. */
export function reportWords(report: { readonly green: boolean } | null): {
  readonly severity: FindingSeverity;
  readonly words: string;
} {
  if (report === null) return { severity: "note", words: "not run" };
  return report.green ? { severity: "fits", words: "green" } : { severity: "stop", words: "red" };
}

export const sectionWords: Readonly<Record<SectionName, string>> = {
  definition: "What the definition says",
  reading: "Reading everything",
  settings: "Each setting at its ends and beyond",
  slots: "Each slot made active",
  memory: "Storing and switching off",
  faults: "Faults of the line and the device",
  recordings: "Recordings",
};

const ms = (value: number) => formatFigure(value, "ms");

function transportWords({ transport }: DriverDefinition): string {
  const { baudRate, dataBits, parity, stopBits, flowControl } = transport;
  const flow = flowControl === "none" ? "no flow control" : "flow control by wire";
  return [
    formatFigure(baudRate, "baud"),
    `${dataBits} data bits`,
    parity === "none" ? "no parity" : `${parity} parity`,
    formatCount(stopBits, "stop bit", "stop bits"),
    flow,
  ].join(", ");
}

function lineCheckWords({ protocol }: DriverDefinition): string {
  if (protocol.kind === "modbus-rtu") return `Modbus RTU, unit ${protocol.unit}; CRC-16 on every frame`;
  if (protocol.kind === "packet") {
    return `Packets of ${formatCount(protocol.blocks.length, "kind of block", "kinds of block")}; checksum ${protocol.checksum}${protocol.stuffing ? "; bytes are stuffed" : ""}`;
  }
  const check = protocol.check
    ? `check ${protocol.check.algorithm} at the end of a line`
    : "no check: a flipped byte can be another valid value";
  return `Lines of text; ${check}${protocol.echo ? "; the device echoes" : ""}`;
}

function paceWords({ pace }: DriverDefinition): string {
  const flight =
    pace.inFlight === 1 ? "one request at a time" : `up to ${pace.inFlight} requests under way`;
  const settle = pace.writeSettleMs > 0 ? `, ${ms(pace.writeSettleMs)} after a write` : "";
  return `${flight}; ${ms(pace.workMs)} of work a request${settle}; an answer within ${ms(pace.replyTimeoutMs)}, asked again ${formatCount(pace.retries, "time", "times")} at most`;
}

function memoryWords({ memory, actions, status }: DriverDefinition): string {
  if (!memory.volatileWrites) return "every write is stored at once";
  const commit = actions.commit ? `stored by an order, which takes ${ms(memory.commitTakesMs)}` : "never stored by an order";
  const asks = status.committed ? "the device says whether it is stored" : "the device does not say whether it is stored";
  const timer = memory.deviceTimer
    ? `it puts old values back by itself within ${formatFigure(memory.deviceTimer.maxSeconds, "s")}`
    : "it puts nothing back by itself";
  return `writes are lost at switch-off until they are ${commit}; ${asks}; ${timer}`;
}

const takesEffect: Readonly<Record<DriverDefinition["timingTakesEffect"], string>> = {
  write: "each number at once",
  block: "with the last number of a block",
  recall: "when a slot is made active",
};

function outputWords({ output, actions }: DriverDefinition): string {
  const edge = output.outsideRaster === "refuses" ? "refuses a picture outside its raster" : "cuts a picture at its raster";
  const rate = output.clock === "free" ? "a clock of its own" : "locked to the input's rate";
  return `${output.kinds.join(" or ")}; ${rate}; ${edge}; ${actions.muteOn ? "can be muted" : "cannot be muted"}`;
}

/** What a driver says of a device model, in words. */
export function driverFacts(definition: DriverDefinition): readonly Fact[] {
  const { firmware, slots, modes, inputs } = definition;
  return [
    { name: "Firmware", words: `${firmwareWords(firmware)}; an update ${firmware.updateErasesSlots ? "erases" : "keeps"} the slots` },
    { name: "Line", words: transportWords(definition) },
    { name: "Protocol", words: lineCheckWords(definition) },
    { name: "Pace", words: paceWords(definition) },
    { name: "Memory", words: memoryWords(definition) },
    { name: "Room", words: `${formatCount(slots.count, "slot", "slots")} from ${slots.first}, ${formatCount(modes.count, "mode", "modes")} from ${modes.first}` },
    { name: "Timing acts", words: takesEffect[definition.timingTakesEffect] },
    { name: "Output", words: outputWords(definition) },
    { name: "Inputs", words: inputs.map(({ label }) => label).join(", ") },
  ];
}

export type SettingRow = {
  readonly key: string;
  readonly label: string;
  readonly reach: string;
  readonly range: string;
  readonly access: string;
};

function rangeWords(value: SettingValue): string {
  if (value.type === "text") return `up to ${formatCount(value.maxLength, "character", "characters")}`;
  if (value.type === "choice") return value.choices.map(({ label }) => label).join(", ");
  const { min, max, step, scale, offset, unit = "" } = value;
  const shown = (native: number) => native * scale + offset;
  const range = formatSpan([shown(min), shown(max)], unit);
  return step * scale === 1 ? range : `${range}, in steps of ${formatNumber(step * scale, { decimalsAtMost: 4 })}`;
}

const reachOf = (key: string) =>
  key.startsWith("slots[*]") ? "each slot" : key.startsWith("modes[*]") ? "each mode" : "everywhere";

function accessWords({ wire }: DriverSetting): string {
  const [reads, writes] =
    wire.kind === "text" ? [wire.read !== undefined, wire.write !== undefined] : [wire.readable, wire.writable];
  if (reads) return writes ? "read, written" : "read only";
  return writes ? "written only" : "neither";
}

/** A driver's settings, each once, with what it can be set to: neutral values, as the pages show them. */
export function settingRows({ settings }: DriverDefinition): readonly SettingRow[] {
  return settings.map((setting) => ({
    key: setting.key,
    label: setting.label,
    reach: reachOf(setting.key),
    range: rangeWords(setting.value),
    access: accessWords(setting),
  }));
}

/** A value of a definition in one line, no longer than a reader takes in; null stands for "not there". */
export function valueWords(value: unknown): string {
  if (value === null || value === undefined) return "–";
  const text = typeof value === "string" ? value : JSON.stringify(value);
  return text.length <= MAX_SHOWN ? text : `${text.slice(0, MAX_SHOWN)}…`;
}
const MAX_SHOWN = 160;

/** The number after a version: one more in the middle ("1.0.3" → "1.1.0"), which is how a changed driver is counted. */
export function nextVersion(version: string): string {
  const [major = 0, minor = 0] = version.split(".").map(Number);
  return minor < 9999 ? `${major}.${minor + 1}.0` : `${major + 1}.0.0`;
}
