import { z } from "zod";
import { inputRangeSchema, lineFilterSchema, outputKindSchema, rasterTimingSchema, syncKindSchema } from "@/lib/profile/document";

/**
 * A driver definition, version 1: how to talk to one device model, as data.
 *
 * Keys of settings are neutral paths with `[*]` for the slot or mode number (`slots[*].placement.offsetPx`,
 * `modes[*].timing.horizontal.active`), or native ones (`native.…`, `slots[*].native.…`, `modes[*].native.…`),
 * which stand in a backup and never in a profile. Bounds keep a definition from a stranger finite.
 */
export const DRIVER_FORMAT = "backporch-driver";
/** Settings of one device, slots and modes counted out. Bounds what a driver expands to. */
export const MAX_SETTINGS = 8192;

const name = z.string().min(1).max(80);
const template = z.string().min(1).max(200);
const whole = z.number().int();

/** A native value as a document writes it: see `native.ts`. */
const nativeValue = z.union([whole, z.string().max(64)]);

/** Check fields by their names in the catalogue of parametrised CRC algorithms; `sum8` and `xor8` run over all bytes. */
export const checkAlgorithmSchema = z.enum(["sum8", "xor8", "crc8-smbus", "crc16-xmodem", "crc16-ibm-3740", "crc16-modbus"]);

/**
 * Request and reply templates with typed holes: `{slot:int}`, `{mode:int}`, `{value:int}`, `{value:fixed1}`, `{name:text16}`, `{value:word}`.
 *
 * `fixed1` to `fixed3` show a whole native number with so many decimals (960 is `96.0`). In a setting, the one hole that is
 * neither `slot` nor `mode` is its value.
 */
export const textExchangeSchema = z.strictObject({ request: template, reply: template });
/** Register of the first slot or mode; the next ones follow by `stride`. */
export const modbusFieldSchema = z.strictObject({
  register: whole.min(0).max(65_535), stride: whole.min(0).max(4096).default(0),
  words: whole.min(1).max(16).default(1), signed: z.boolean().default(false), wordOrder: z.enum(["high-first", "low-first"]).default("high-first"),
  encoding: z.enum(["integer", "ascii"]).default("integer"),
  /** Function 03 reads holding registers, 04 input registers; only holding ones are written. */
  table: z.enum(["holding", "input"]).default("holding"),
});
/** Place of a field in a numbered block. */
export const packetFieldSchema = z.strictObject({
  block: z.string().max(40), byteOffset: whole.min(0).max(1024), bytes: whole.min(1).max(64), signed: z.boolean().default(false),
  encoding: z.enum(["integer", "ascii"]).default("integer"),
});
export const wireSchema = z.discriminatedUnion("kind", [
  z.strictObject({ kind: z.literal("text"), read: textExchangeSchema.optional(), write: textExchangeSchema.optional() }),
  z.strictObject({ kind: z.literal("modbus"), field: modbusFieldSchema, readable: z.boolean().default(true), writable: z.boolean().default(true) }),
  z.strictObject({ kind: z.literal("packet"), field: packetFieldSchema, readable: z.boolean().default(true), writable: z.boolean().default(true) }),
]);

/** The native value: whole numbers (neutral = native · scale + offset), a list of words, or a text. */
export const settingValueSchema = z.discriminatedUnion("type", [
  z.strictObject({
    type: z.literal("integer"), min: whole, max: whole, step: whole.min(1).default(1),
    scale: z.number().positive().default(1), offset: z.number().default(0), unit: z.string().max(16).optional(),
  }),
  z.strictObject({
    type: z.literal("choice"),
    choices: z.array(z.strictObject({ native: z.union([whole, z.string().max(32)]), neutral: z.union([z.string(), z.number(), z.boolean()]), label: name })).min(1).max(64),
  }),
  z.strictObject({ type: z.literal("text"), maxLength: whole.min(1).max(64), characters: z.string().max(256) }),
]);

export const settingSchema = z.strictObject({
  key: z.string().min(1).max(120),
  label: name,
  value: settingValueSchema,
  /** What a new device holds, native; `factory` of the driver says otherwise for single slots and modes. */
  initial: nativeValue,
  wire: wireSchema,
});

export const statusNameSchema = z.enum([
  "identity", "activeSlot", "arriving", "bootCount", "committed", "rasterOut", "errorQueue", "operationComplete",
]);
export const actionNameSchema = z.enum([
  "recall", "commit", "armTimer", "extendTimer", "confirmTimer", "disarmTimer", "muteOn", "muteOff",
]);

/**
 * A query or an order that is not a setting. Its fields (holes of a template, or named registers) are:
 *
 * - `identity`: maker, model, serial, firmware · `activeSlot`, `recall`: slot · `bootCount`: count · `committed`: committed (0, 1)
 * - `rasterOut`: clock, hActive, hFrontPorch, hSync, hBackPorch, hPolarity, vActive, vFrontPorch, vSync, vBackPorch, vPolarity, scan,
 *   each as the settings of a mode hold it; a clock of 0 says that nothing is put out
 * - `arriving`: input (as `slots[*].input` holds it), activePx (0: nothing arrives), activeLines, interlaced (0, 1), fieldRateMilliHz, locked (0, 1)
 * - `armTimer`, `extendTimer`: seconds · `errorQueue`: code, message · `operationComplete`: complete
 *
 * `value` is what an order without an argument writes into its register.
 */
export const operationWireSchema = z.discriminatedUnion("kind", [
  z.strictObject({ kind: z.literal("text"), request: template, reply: template }),
  z.strictObject({
    kind: z.literal("modbus"), fields: z.array(z.strictObject({ name, field: modbusFieldSchema })).min(1).max(16), value: whole.optional(),
  }),
  z.strictObject({
    kind: z.literal("packet"), fields: z.array(z.strictObject({ name, field: packetFieldSchema })).min(1).max(16), value: whole.optional(),
  }),
]);

const acceptedFormatSchema = z.strictObject({
  activeLines: z.tuple([whole, whole]).optional(), interlaced: z.boolean().optional(),
  fieldRateHz: z.tuple([z.number(), z.number()]).optional(), locks: z.enum(["locks", "does-not-lock", "unknown"]),
});
const idleRasterSchema = z.union([rasterTimingSchema, z.literal("unknown")]);

export const protocolSchema = z.discriminatedUnion("kind", [
  z.strictObject({
    kind: z.literal("text"),
    lineEnd: z.enum(["\n", "\r", "\r\n"]),
    /** Check field at the end of a line: hex digits after `*`, as in IEC 61162-1. */
    check: z.strictObject({ algorithm: checkAlgorithmSchema, requiredInReplies: z.boolean() }).optional(),
    echo: z.boolean().default(false),
    /** Requests that the device takes without the check too, and then answers without it (`*IDN?` from a terminal). */
    uncheckedRequests: z.array(template).max(16).default([]),
    /** `{header:…}` names the request: its text up to the first space or question mark. */
    refusalReply: template.optional(),
    busyReply: template.optional(),
    maxLineBytes: whole.min(16).max(1024).default(128),
  }),
  z.strictObject({ kind: z.literal("modbus-rtu"), unit: whole.min(1).max(247), maxReadGap: whole.min(0).max(64).default(0) }),
  z.strictObject({
    kind: z.literal("packet"), start: z.array(whole.min(0).max(255)).min(1).max(4), lengthBytes: whole.min(1).max(2),
    byteOrder: z.enum(["big", "little"]), checksum: checkAlgorithmSchema, stuffing: z.boolean().default(false),
    blocks: z.array(z.strictObject({ name: z.string().max(40), number: whole.min(0).max(255), bytes: whole.min(1).max(1024), repeats: z.enum(["once", "slots", "modes"]) })).max(64),
  }),
]);

export const driverDefinitionSchema = z.strictObject({
  format: z.literal(DRIVER_FORMAT),
  formatVersion: z.literal(1),
  maker: name, model: name,
  slug: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/u).max(64),
  version: z.string().regex(/^\d{1,4}\.\d{1,4}\.\d{1,4}$/u),
  firmware: z.strictObject({ min: z.string().max(16), max: z.string().max(16), updateErasesSlots: z.boolean() }),
  transport: z.strictObject({
    baudRate: whole.min(300).max(4_000_000), dataBits: z.union([z.literal(7), z.literal(8)]), stopBits: z.union([z.literal(1), z.literal(2)]),
    parity: z.enum(["none", "even", "odd"]), flowControl: z.enum(["none", "hardware"]),
  }),
  protocol: protocolSchema,
  pace: z.strictObject({
    replyTimeoutMs: z.number().min(10).max(60_000), retries: whole.min(0).max(5), gapMs: z.number().min(0).max(1000),
    inFlight: whole.min(1).max(16), workMs: z.number().min(0).max(1000), writeSettleMs: z.number().min(0).max(5000).default(0),
  }),
  memory: z.strictObject({
    volatileWrites: z.boolean(),
    commitTakesMs: z.number().min(0).max(60_000).default(0),
    /** Where the device can put the old values back by itself. */
    deviceTimer: z.strictObject({ maxSeconds: whole.min(1).max(86_400) }).optional(),
  }),
  /** `first` is the lowest number. A mode number of `emptyMode` in a slot says that the slot is empty. */
  slots: z.strictObject({ first: whole.min(0), count: whole.min(1).max(256), emptyMode: whole.optional() }),
  modes: z.strictObject({ first: whole.min(0), count: whole.min(1).max(256) }),
  timingTakesEffect: z.enum(["write", "block", "recall"]),
  output: z.strictObject({
    kinds: z.array(outputKindSchema).min(1).max(2),
    sync: z.array(z.strictObject({ kind: syncKindSchema, vpp: z.number().positive().optional(), sourceOhm: z.number().positive().optional() })).min(1).max(4),
    outsideRaster: z.enum(["refuses", "cuts"]), clock: z.enum(["free", "input"]),
    idle: z.strictObject({ switchOn: idleRasterSchema, withoutInput: idleRasterSchema, afterReset: idleRasterSchema }),
    lineFilter: lineFilterSchema.optional(), interlace: z.boolean(), horizontalMultiple: whole.min(1).max(64).default(1),
    maxLineTotal: whole.optional(), maxFieldLines: whole.optional(),
  }),
  inputs: z.array(z.strictObject({ name, label: name, range: inputRangeSchema.optional(), accepts: z.array(acceptedFormatSchema).max(32) })).min(1).max(32),
  /** Queries whose reply is status. A name that is missing: the device has no such query. */
  status: z.partialRecord(statusNameSchema, operationWireSchema),
  actions: z.partialRecord(actionNameSchema, operationWireSchema),
  settings: z.array(settingSchema).min(1).max(512),
  /** What a new device holds where that differs from a setting's `initial`, by native key. */
  factory: z.record(z.string().max(120), nativeValue).refine((values) => Object.keys(values).length <= MAX_SETTINGS, "has too many values").default({}),
  /** How the device starts: the time it takes before it answers, and the lines (or bytes as text) it sends meanwhile. */
  boot: z.strictObject({ takesMs: whole.min(0).max(60_000), chatter: z.array(z.string().max(80)).max(8) }).default({ takesMs: 0, chatter: [] }),
});

export type DriverDefinition = z.infer<typeof driverDefinitionSchema>;
export type DriverSetting = z.infer<typeof settingSchema>;
export type SettingValue = z.infer<typeof settingValueSchema>;
export type StatusName = z.infer<typeof statusNameSchema>;
export type ActionName = z.infer<typeof actionNameSchema>;
export type ModbusField = z.infer<typeof modbusFieldSchema>;
export type PacketField = z.infer<typeof packetFieldSchema>;
export type OperationWire = z.infer<typeof operationWireSchema>;
export type CheckAlgorithm = z.infer<typeof checkAlgorithmSchema>;
export type TextExchange = z.infer<typeof textExchangeSchema>;
