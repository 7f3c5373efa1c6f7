import { DRIVER_FORMAT, driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { FACTORY_MODES, factoryModes, factorySlots, IDLE_480P60 } from "./factory-modes";

/**
 * Ternwick 16: an invented device. Packets that read and write whole blocks; every write is non-volatile at once, a mode's
 * timing is taken as one, two settings cannot be read back, the output follows the rate that arrives.
 */
const LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789 ,.-+/&()";

const at = (block: string, byteOffset: number, bytes: number, more: object = {}) => ({ block, byteOffset, bytes, ...more });
const packet = (field: object) => ({ kind: "packet", field });
const integer = (min: number, max: number, unit: string, more: object = {}) => ({ type: "integer", min, max, unit, ...more });
const choice = (...choices: readonly (readonly [neutral: string | boolean, label: string])[]) => ({
  type: "choice", choices: choices.map(([neutral, label], native) => ({ native, neutral, label })),
});
const half = { step: 1, scale: 0.5 };
const polarity = choice(["negative", "negative"], ["positive", "positive"]);
const trim = (side: string, label: string, offset: number, most: number, unit: string) => ({
  key: `everywhere.trim.${side}`, label, value: integer(-8, most, unit), initial: 0, wire: packet(at("trim", offset, 2, { signed: true })),
});
const hidden = (key: string, label: string, block: string, value: object, initial: number) => ({ key, label, value, initial, wire: { ...packet(at(block, 0, 1)), readable: false } });
const slot = (key: string, label: string, offset: number, bytes: number, value: object, initial: number | string, more: object = {}) => ({
  key: `slots[*].${key}`, label, value, initial, wire: packet(at("slot", offset, bytes, more)),
});
const mode = (key: string, label: string, offset: number, bytes: number, value: object, initial: number) => ({
  key: `modes[*].timing.${key}`, label, value, initial, wire: packet(at("timing", offset, bytes)),
});

const settings = [
  trim("leftPx", "Trim left", 0, 320, "px"),
  trim("rightPx", "Trim right", 2, 320, "px"),
  trim("topLines", "Trim top", 4, 200, "lines"),
  trim("bottomLines", "Trim bottom", 6, 200, "lines"),
  hidden("everywhere.powerOnSlot", "Slot at switch-on", "start", integer(1, 16, ""), 1),
  hidden("native.remoteCode", "Remote control code", "remote", integer(0, 99, ""), 7),
  slot("name", "Name", 0, 14, { type: "text", maxLength: 14, characters: LETTERS }, "", { encoding: "ascii" }),
  slot("input", "Input", 14, 1, choice(["digital-1", "digital 1"], ["digital-2", "digital 2"], ["component-1", "component"]), 0),
  slot("mode", "Output mode", 15, 1, integer(0, 24, ""), 0),
  slot("placement.offsetPx", "Horizontal position", 16, 2, integer(-100, 100, "px"), 0, { signed: true }),
  slot("placement.offsetLines", "Vertical position", 18, 2, integer(-24, 24, "lines"), 0, { signed: true }),
  slot("placement.widthPct", "Width", 20, 2, integer(120, 220, "%", half), 192),
  slot("placement.heightPct", "Height", 22, 2, integer(120, 220, "%", half), 192),
  slot("syncKind", "Sync", 24, 1, choice(["composite", "composite"], ["onLuma", "on luma"]), 0),
  slot("outputKind", "Output", 25, 1, choice(["RGB", "RGB"], ["YPbPr", "YPbPr"]), 0),
  slot("inputRange", "Input range", 26, 1, choice(["full", "full"], ["limited", "limited"]), 0),
  slot("colour.brightnessPct", "Brightness", 27, 1, integer(60, 140, "%"), 100),
  slot("colour.contrastPct", "Contrast", 28, 1, integer(60, 140, "%"), 100),
  slot("colour.saturationPct", "Saturation", 29, 1, integer(0, 200, "%", { step: 5 }), 100),
  mode("pixelClockHz", "Pixel clock", 0, 4, integer(8000, 150_000, "kHz", { step: 25, scale: 1000 }), 27_000),
  mode("interlaced", "Scan", 4, 1, choice([false, "progressive"], [true, "interlaced"]), 0),
  mode("horizontal.active", "Picture across", 5, 2, integer(64, 1920, "px"), 720),
  mode("horizontal.frontPorch", "Front porch across", 7, 2, integer(1, 800, "px"), 16),
  mode("horizontal.sync", "Sync across", 9, 2, integer(1, 400, "px"), 62),
  mode("horizontal.backPorch", "Back porch across", 11, 2, integer(1, 800, "px"), 60),
  mode("horizontal.polarity", "Horizontal polarity", 13, 1, polarity, 0),
  mode("vertical.active", "Picture down", 14, 2, integer(64, 1100, "lines"), 480),
  mode("vertical.frontPorch", "Front porch down", 16, 2, integer(1, 300, "lines"), 9),
  mode("vertical.sync", "Sync down", 18, 1, integer(1, 30, "lines"), 6),
  mode("vertical.backPorch", "Back porch down", 19, 2, integer(1, 300, "lines"), 30),
  mode("vertical.polarity", "Vertical polarity", 21, 1, polarity, 0),
];

const query = (block: string, ...fields: readonly (readonly [name: string, offset: number, bytes: number, more?: object])[]) => ({
  kind: "packet", fields: fields.map(([name, offset, bytes, more]) => ({ name, field: at(block, offset, bytes, more) })),
});
const ascii = { encoding: "ascii" };

export const ternwick16: DriverDefinition = driverDefinitionSchema.parse({
  format: DRIVER_FORMAT, formatVersion: 1,
  maker: "Ternwick", model: "16", slug: "ternwick-16", version: "1.0.0",
  firmware: { min: "4.0", max: "4.6", updateErasesSlots: true },
  transport: { baudRate: 57_600, dataBits: 8, stopBits: 1, parity: "none", flowControl: "none" },
  protocol: {
    kind: "packet", start: [0x54, 0x57], lengthBytes: 1, byteOrder: "little", checksum: "crc16-ibm-3740", stuffing: true,
    blocks: [
      { name: "trim", number: 1, bytes: 8, repeats: "once" },
      { name: "start", number: 2, bytes: 1, repeats: "once" },
      { name: "remote", number: 3, bytes: 1, repeats: "once" },
      { name: "slot", number: 16, bytes: 30, repeats: "slots" },
      { name: "timing", number: 32, bytes: 22, repeats: "modes" },
      { name: "identity", number: 64, bytes: 48, repeats: "once" },
      { name: "active", number: 65, bytes: 1, repeats: "once" },
      { name: "arriving", number: 66, bytes: 11, repeats: "once" },
    ],
  },
  pace: { replyTimeoutMs: 350, retries: 3, gapMs: 0, inFlight: 1, workMs: 10, writeSettleMs: 80 },
  memory: { volatileWrites: false },
  slots: { first: 1, count: 16, emptyMode: 0 },
  modes: { first: 1, count: 24 },
  timingTakesEffect: "block",
  output: {
    kinds: ["RGB", "YPbPr"],
    sync: [{ kind: "composite", vpp: 0.6, sourceOhm: 75 }, { kind: "onLuma", vpp: 0.6, sourceOhm: 75 }],
    outsideRaster: "cuts", clock: "input",
    idle: { switchOn: IDLE_480P60, withoutInput: "unknown", afterReset: IDLE_480P60 },
    lineFilter: "smooth", interlace: true, horizontalMultiple: 1, maxLineTotal: 3000, maxFieldLines: 1300,
  },
  inputs: [
    { name: "digital-1", label: "digital 1", accepts: [{ activeLines: [480, 1080], fieldRateHz: [49, 61], locks: "locks" }] },
    { name: "digital-2", label: "digital 2", accepts: [{ activeLines: [480, 1080], fieldRateHz: [49, 61], locks: "locks" }] },
    { name: "component-1", label: "component", accepts: [{ activeLines: [480, 1080], fieldRateHz: [49, 61], locks: "locks" }, { activeLines: [240, 288], locks: "locks" }] },
  ],
  status: {
    identity: query("identity", ["maker", 0, 16, ascii], ["model", 16, 8, ascii], ["serial", 24, 16, ascii], ["firmware", 40, 8, ascii]),
    activeSlot: query("active", ["slot", 0, 1]),
    arriving: query("arriving", ["input", 0, 1], ["activePx", 1, 2], ["activeLines", 3, 2], ["interlaced", 5, 1], ["fieldRateMilliHz", 6, 4], ["locked", 10, 1]),
  },
  actions: { recall: query("active", ["slot", 0, 1]) },
  settings,
  factory: {
    ...factoryModes(FACTORY_MODES, { clock: (kHz) => kHz, scan: [0, 1], polarity: [0, 1], named: false }),
    ...factorySlots([["Set, 240 lines", 1], ["Set, 480 lines", 2], ["Set, 288 lines", 3], ["Set, 576 lines", 4], ["Monitor", 5]]),
  },
  boot: { takesMs: 900, chatter: [] },
});
