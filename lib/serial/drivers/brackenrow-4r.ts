import { DRIVER_FORMAT, driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { FACTORY_MODES, factoryModes, factorySlots } from "./factory-modes";

/**
 * Brackenrow 4R: an invented device. Modbus RTU; each number takes effect at once, under a mute where there is no safe order;
 * volatile writes and a commit register, but nothing that says whether all is stored.
 *
 * Registers: 0 everywhere, 20 orders, 100 slots of 40, 1000 modes of 20; input registers: 0 identity, 40 what goes on.
 */
const CAPITALS = "ABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789 -.:/";

const SLOTS_AT = 100;
const SLOT_STRIDE = 40;
const MODES_AT = 1000;
const MODE_STRIDE = 20;

const modbus = (field: object) => ({ kind: "modbus", field });
const everywhere = (key: string, label: string, register: number, value: object, initial: number, signed = false) => ({ key, label, value, initial, wire: modbus({ register, signed }) });
const slot = (key: string, label: string, offset: number, value: object, initial: number | string, more: object = {}) => ({
  key: `slots[*].${key}`, label, value, initial, wire: modbus({ register: SLOTS_AT + offset, stride: SLOT_STRIDE, ...more }),
});
const mode = (key: string, label: string, offset: number, value: object, initial: number, more: object = {}) => ({
  key: `modes[*].timing.${key}`, label, value, initial, wire: modbus({ register: MODES_AT + offset, stride: MODE_STRIDE, ...more }),
});
const integer = (min: number, max: number, unit: string, more: object = {}) => ({ type: "integer", min, max, unit, ...more });
const choice = (...choices: readonly (readonly [neutral: string | boolean, label: string])[]) => ({
  type: "choice", choices: choices.map(([neutral, label], native) => ({ native, neutral, label })),
});
const polarity = choice(["negative", "negative"], ["positive", "positive"]);
const across = (least: number, most: number) => integer(least, most, "px", { step: 2 });

const settings = [
  everywhere("everywhere.trim.leftPx", "Trim left", 0, integer(0, 200, "px", { step: 2 }), 0),
  everywhere("everywhere.trim.rightPx", "Trim right", 1, integer(0, 200, "px", { step: 2 }), 0),
  everywhere("everywhere.trim.topLines", "Trim top", 2, integer(0, 100, "lines"), 0),
  everywhere("everywhere.trim.bottomLines", "Trim bottom", 3, integer(0, 100, "lines"), 0),
  everywhere("everywhere.powerOnSlot", "Slot at switch-on", 4, integer(1, 4, ""), 1),
  everywhere("native.outputGain", "Output gain", 5, integer(-20, 20, "%"), 0, true),
  everywhere("native.standbyMinutes", "Standby after", 6, integer(0, 240, "min", { step: 10 }), 0),
  slot("name", "Name", 0, { type: "text", maxLength: 12, characters: CAPITALS }, "", { words: 6, encoding: "ascii" }),
  slot("input", "Input", 8, choice(["digital-1", "digital"], ["analogue-1", "analogue"]), 0),
  slot("mode", "Output mode", 9, integer(0, 12, ""), 0),
  slot("placement.offsetPx", "Horizontal position", 10, integer(-128, 128, "px", { step: 2 }), 0, { signed: true }),
  slot("placement.offsetLines", "Vertical position", 11, integer(-32, 32, "lines"), 0, { signed: true }),
  slot("placement.widthPct", "Width", 12, integer(50, 110, "%"), 96),
  slot("placement.heightPct", "Height", 13, integer(50, 110, "%"), 96),
  slot("syncKind", "Sync", 14, choice(["composite", "composite"], ["separate", "separate"]), 0),
  slot("colour.brightnessPct", "Brightness", 15, integer(80, 120, "%", { step: 2 }), 100),
  slot("colour.contrastPct", "Contrast", 16, integer(80, 120, "%", { step: 2 }), 100),
  mode("pixelClockHz", "Pixel clock", 0, integer(6_000_000, 80_000_000, "Hz", { step: 1000 }), 27_000_000, { words: 2 }),
  mode("interlaced", "Scan", 2, choice([false, "progressive"], [true, "interlaced"]), 0),
  mode("horizontal.active", "Picture across", 3, across(128, 1920), 720),
  mode("horizontal.frontPorch", "Front porch across", 4, across(2, 510), 16),
  mode("horizontal.sync", "Sync across", 5, across(2, 510), 62),
  mode("horizontal.backPorch", "Back porch across", 6, across(2, 510), 60),
  mode("horizontal.polarity", "Horizontal polarity", 7, polarity, 0),
  mode("vertical.active", "Picture down", 8, integer(100, 800, "lines"), 480),
  mode("vertical.frontPorch", "Front porch down", 9, integer(1, 120, "lines"), 9),
  mode("vertical.sync", "Sync down", 10, integer(1, 20, "lines"), 6),
  mode("vertical.backPorch", "Back porch down", 11, integer(1, 120, "lines"), 30),
  mode("vertical.polarity", "Vertical polarity", 12, polarity, 0),
];

const query = (...fields: readonly (readonly [name: string, field: object])[]) => ({ kind: "modbus", fields: fields.map(([name, field]) => ({ name, field })) });
const input = (register: number, more: object = {}) => ({ register, table: "input", ...more });
const text = (register: number, words: number) => input(register, { words, encoding: "ascii" });
const order = (name: string, register: number, value?: number) => ({ ...query([name, { register }]), ...(value === undefined ? {} : { value }) });

export const brackenrow4r: DriverDefinition = driverDefinitionSchema.parse({
  format: DRIVER_FORMAT, formatVersion: 1,
  maker: "Brackenrow", model: "4R", slug: "brackenrow-4r", version: "1.0.0",
  firmware: { min: "1.8", max: "2.1", updateErasesSlots: false },
  transport: { baudRate: 38_400, dataBits: 8, stopBits: 1, parity: "even", flowControl: "none" },
  protocol: { kind: "modbus-rtu", unit: 17, maxReadGap: 8 },
  pace: { replyTimeoutMs: 300, retries: 3, gapMs: 0, inFlight: 1, workMs: 5 },
  memory: { volatileWrites: true, commitTakesMs: 120 },
  slots: { first: 1, count: 4, emptyMode: 0 },
  modes: { first: 1, count: 12 },
  timingTakesEffect: "write",
  output: {
    kinds: ["RGB"],
    sync: [{ kind: "composite", vpp: 1, sourceOhm: 75 }, { kind: "separate", vpp: 4, sourceOhm: 75 }],
    outsideRaster: "cuts", clock: "free",
    idle: { switchOn: "unknown", withoutInput: "unknown", afterReset: "unknown" },
    lineFilter: "linear", interlace: true, horizontalMultiple: 2, maxLineTotal: 2400, maxFieldLines: 900,
  },
  inputs: [
    { name: "digital-1", label: "digital", accepts: [{ activeLines: [480, 1080], fieldRateHz: [49, 61], locks: "locks" }, { activeLines: [240, 288], locks: "unknown" }] },
    { name: "analogue-1", label: "analogue", accepts: [{ activeLines: [240, 576], fieldRateHz: [49, 61], locks: "locks" }, { activeLines: [720, 1080], locks: "does-not-lock" }] },
  ],
  status: {
    identity: query(["maker", text(0, 8)], ["model", text(8, 4)], ["serial", text(12, 8)], ["firmware", text(20, 4)]),
    bootCount: query(["count", input(40)]),
    arriving: query(["input", input(41)], ["activePx", input(42)], ["activeLines", input(43)], ["interlaced", input(44)], ["fieldRateMilliHz", input(45, { words: 2 })], ["locked", input(47)]),
    activeSlot: query(["slot", { register: 20 }]),
  },
  actions: { recall: order("slot", 20), commit: order("store", 21, 0x4b45), muteOn: order("mute", 22, 1), muteOff: order("mute", 22, 0) },
  settings,
  factory: {
    ...factoryModes(FACTORY_MODES, { clock: (kHz) => kHz * 1000, scan: [0, 1], polarity: [0, 1], named: false }),
    ...factorySlots([["240 AT 60", 1], ["480I AT 60", 2], ["288 AT 50", 3]]),
  },
  boot: { takesMs: 600, chatter: [] },
});
