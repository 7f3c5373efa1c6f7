import type { SerialOpenOptions } from "@/lib/serial/port";

/** The engine's bound; the specification allows any refusal of a buffer too large. */
export const MAX_BUFFER_BYTES = 16 * 1024 * 1024;
/** WICG/serial, `SerialOptions`. */
export const DEFAULT_BUFFER_BYTES = 255;

const PARITIES = ["none", "even", "odd"] as const;
const FLOW_CONTROLS = ["none", "hardware"] as const;

export type ConvertedOptions = Required<{ [Name in keyof SerialOpenOptions]: NonNullable<SerialOpenOptions[Name]> }>;
type Raw = { readonly [Name in keyof SerialOpenOptions]?: unknown };

/** Web IDL's conversion to an unsigned integer with [EnforceRange]. */
function whole(name: string, value: unknown, max: number): number {
  const number = Math.trunc(Number(value));
  if (!Number.isFinite(number) || number < 0 || number > max)
    throw new TypeError(`${name} is not a whole number from 0 to ${max}.`);
  return number;
}

function word<Word extends string>(name: string, value: unknown, words: readonly Word[]): Word {
  const found = words.find((each) => each === String(value));
  if (found === undefined) throw new TypeError(`${name} is none of ${words.join(", ")}.`);
  return found;
}

/** What Web IDL does before the method's own steps: throws TypeError for what is missing, out of range or no such word. */
export function convertOpenOptions(raw: Raw | null | undefined): ConvertedOptions {
  if (raw?.baudRate === undefined) throw new TypeError("baudRate is required.");
  return {
    baudRate: whole("baudRate", raw.baudRate, 0xffff_ffff),
    dataBits: (raw.dataBits === undefined ? 8 : whole("dataBits", raw.dataBits, 255)) as 7 | 8,
    stopBits: (raw.stopBits === undefined ? 1 : whole("stopBits", raw.stopBits, 255)) as 1 | 2,
    parity: raw.parity === undefined ? "none" : word("parity", raw.parity, PARITIES),
    bufferSize: raw.bufferSize === undefined ? DEFAULT_BUFFER_BYTES : whole("bufferSize", raw.bufferSize, 0xffff_ffff),
    flowControl: raw.flowControl === undefined ? "none" : word("flowControl", raw.flowControl, FLOW_CONTROLS),
  };
}

/** What `open()` itself refuses with TypeError, after it has looked at the port's state. */
export function checkOpenOptions(options: ConvertedOptions): void {
  if (options.baudRate === 0) throw new TypeError("baudRate must be greater than zero.");
  if (options.dataBits !== 7 && options.dataBits !== 8) throw new TypeError("dataBits must be 7 or 8.");
  if (options.stopBits !== 1 && options.stopBits !== 2) throw new TypeError("stopBits must be 1 or 2.");
  if (options.bufferSize === 0) throw new TypeError("bufferSize must be greater than zero.");
  if (options.bufferSize > MAX_BUFFER_BYTES) throw new TypeError("bufferSize must not exceed 16 MiB.");
}
