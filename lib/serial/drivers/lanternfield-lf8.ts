import { DRIVER_FORMAT, driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { FACTORY_MODES, factoryModes, factorySlots, IDLE_480P60 } from "./factory-modes";

/**
 * Lanternfield LF-8: an invented device. Lines of text with a CRC-16 check, replies that name the setting,
 * working memory with a device timer, timing that takes effect when a slot is made active.
 *
 * Command style: SCPI and IEEE 488.2 conventions (`*IDN?`, `*RCL`, `SYST:ERR?`); the words are this device's own.
 */
const PRINTABLE = String.fromCharCode(...Array.from({ length: 95 }, (_, index) => 32 + index));

const text = (read: string, write: string, value: string, named: string) => ({
  kind: "text", read: { request: `${read}?`, reply: `${named}=${value}` }, write: { request: `${write} ${value}`, reply: `${named}=${value}` },
});
const wire = (header: string, value: string) => text(header, header, value, header);
const integer = (min: number, max: number, unit: string, more: object = {}) => ({ type: "integer", min, max, unit, ...more });
const setting = (key: string, label: string, header: string, hole: string, value: object, initial: number | string) => ({
  key, label, value, initial, wire: wire(header, `{value:${hole}}`),
});
const slot = (key: string, label: string, word: string, hole: string, value: object, initial: number | string) =>
  setting(`slots[*].${key}`, label, `SLOT{slot:int}:${word}`, hole, value, initial);
const mode = (key: string, label: string, word: string, hole: string, value: object, initial: number | string) =>
  setting(`modes[*].${key}`, label, `MODE{mode:int}:${word}`, hole, value, initial);
const choice = (...choices: readonly (readonly [native: string, neutral: string | boolean, label: string])[]) => ({
  type: "choice", choices: choices.map(([native, neutral, label]) => ({ native, neutral, label })),
});
const polarity = choice(["NEG", "negative", "negative"], ["POS", "positive", "positive"]);
const name = { type: "text", maxLength: 16, characters: PRINTABLE };

const everywhereSettings = [
  setting("everywhere.trim.leftPx", "Trim left", "TRIM:LEFT", "int", integer(-32, 255, "px"), 0),
  setting("everywhere.trim.rightPx", "Trim right", "TRIM:RIGHT", "int", integer(-32, 255, "px"), 0),
  setting("everywhere.trim.topLines", "Trim top", "TRIM:TOP", "int", integer(-16, 120, "lines"), 0),
  setting("everywhere.trim.bottomLines", "Trim bottom", "TRIM:BOTTOM", "int", integer(-16, 120, "lines"), 0),
  setting("everywhere.powerOnSlot", "Slot at switch-on", "SYST:START", "int", integer(1, 8, ""), 1),
  setting("native.fanPct", "Fan speed", "SYST:FAN", "int", integer(20, 100, "%", { step: 5 }), 40),
  setting("native.panelLight", "Front panel light", "SYST:PANEL", "int", integer(0, 10, ""), 6),
];

const slotSettings = [
  slot("name", "Name", "NAME", "text16", name, ""),
  slot("input", "Input", "INPUT", "word", choice(["D1", "digital-1", "digital 1"], ["D2", "digital-2", "digital 2"], ["A1", "analogue-1", "analogue 1"], ["C1", "component-1", "component 1"]), "D1"),
  slot("mode", "Output mode", "MODE", "int", integer(0, 32, ""), 0),
  slot("placement.offsetPx", "Horizontal position", "HPOS", "int", integer(-64, 63, "px"), 0),
  slot("placement.offsetLines", "Vertical position", "VPOS", "int", integer(-20, 20, "lines"), 0),
  slot("placement.widthPct", "Width", "WIDTH", "fixed1", integer(800, 1200, "%", { step: 4, scale: 0.1 }), 960),
  slot("placement.heightPct", "Height", "HEIGHT", "fixed1", integer(800, 1200, "%", { step: 4, scale: 0.1 }), 960),
  slot("syncKind", "Sync", "SYNC", "word", choice(["COMP", "composite", "composite"], ["SEP", "separate", "separate"], ["GRN", "onGreen", "on green"], ["LUM", "onLuma", "on luma"]), "COMP"),
  slot("outputKind", "Output", "OUT", "word", choice(["RGB", "RGB", "RGB"], ["YPP", "YPbPr", "YPbPr"]), "RGB"),
  slot("inputRange", "Input range", "RANGE", "word", choice(["FULL", "full", "full"], ["LIM", "limited", "limited"]), "FULL"),
  slot("colour.brightnessPct", "Brightness", "BRIGHT", "int", integer(50, 150, "%"), 100),
  slot("colour.contrastPct", "Contrast", "CONTR", "int", integer(50, 150, "%"), 100),
  slot("colour.saturationPct", "Saturation", "SATUR", "int", integer(0, 200, "%"), 100),
  slot("lineFilter", "Line filter", "FILTER", "word", choice(["NEAR", "nearest", "nearest line"], ["LIN", "linear", "two lines"], ["AREA", "area", "mean of lines"], ["SMOOTH", "smooth", "soft"]), "AREA"),
];

const modeSettings = [
  mode("name", "Name", "NAME", "text16", name, ""),
  mode("timing.pixelClockHz", "Pixel clock", "CLK", "int", integer(5000, 165_000, "kHz", { step: 50, scale: 1000 }), 27_000),
  mode("timing.interlaced", "Scan", "SCAN", "word", choice(["P", false, "progressive"], ["I", true, "interlaced"]), "P"),
  mode("timing.horizontal.active", "Picture across", "HACT", "int", integer(64, 2048, "px"), 720),
  mode("timing.horizontal.frontPorch", "Front porch across", "HFP", "int", integer(1, 1023, "px"), 16),
  mode("timing.horizontal.sync", "Sync across", "HSYN", "int", integer(1, 1023, "px"), 62),
  mode("timing.horizontal.backPorch", "Back porch across", "HBP", "int", integer(1, 1023, "px"), 60),
  mode("timing.horizontal.polarity", "Horizontal polarity", "HPOL", "word", polarity, "NEG"),
  mode("timing.vertical.active", "Picture down", "VACT", "int", integer(64, 1200, "lines"), 480),
  mode("timing.vertical.frontPorch", "Front porch down", "VFP", "int", integer(1, 255, "lines"), 9),
  mode("timing.vertical.sync", "Sync down", "VSYN", "int", integer(1, 63, "lines"), 6),
  mode("timing.vertical.backPorch", "Back porch down", "VBP", "int", integer(1, 255, "lines"), 30),
  mode("timing.vertical.polarity", "Vertical polarity", "VPOL", "word", polarity, "NEG"),
];

const RASTER_FIELDS =
  "{clock:int},{hActive:int},{hFrontPorch:int},{hSync:int},{hBackPorch:int},{hPolarity:word},{vActive:int},{vFrontPorch:int},{vSync:int},{vBackPorch:int},{vPolarity:word},{scan:word}";

const query = (request: string, reply: string) => ({ kind: "text", request, reply });

const factory = {
  ...factoryModes(FACTORY_MODES, { clock: (kHz) => kHz, scan: ["P", "I"], polarity: ["NEG", "POS"], named: true }),
  ...factorySlots([["240 lines 60 Hz", 1], ["480 lines 60 Hz", 2], ["288 lines 50 Hz", 3], ["576 lines 50 Hz", 4], ["Monitor 480", 5]]),
};

const digitalFormats = [
  { activeLines: [480, 1080], interlaced: false, fieldRateHz: [49, 61], locks: "locks" },
  { activeLines: [480, 1080], interlaced: true, fieldRateHz: [49, 61], locks: "locks" },
  { activeLines: [240, 288], locks: "does-not-lock" },
];
const analogueFormats = [
  { activeLines: [240, 576], fieldRateHz: [49, 61], locks: "locks" },
  { activeLines: [720, 1080], interlaced: false, fieldRateHz: [49, 61], locks: "locks" },
  { activeLines: [1080, 1080], interlaced: true, locks: "unknown" },
];

export const lanternfieldLf8: DriverDefinition = driverDefinitionSchema.parse({
  format: DRIVER_FORMAT, formatVersion: 1,
  maker: "Lanternfield", model: "LF-8", slug: "lanternfield-lf8", version: "1.0.0",
  firmware: { min: "3.0", max: "3.4", updateErasesSlots: true },
  transport: { baudRate: 115_200, dataBits: 8, stopBits: 1, parity: "none", flowControl: "none" },
  protocol: {
    kind: "text", lineEnd: "\n", check: { algorithm: "crc16-xmodem", requiredInReplies: true },
    uncheckedRequests: ["*IDN?", "*OPC?", "SYST:ERR?"],
    refusalReply: "{header:text40}!{code:int} {message:text40}", busyReply: "{header:text40}!BUSY", maxLineBytes: 128,
  },
  // 2 ms of work, and a page that is busy drawing lets bytes wait for some 100 ms.
  pace: { replyTimeoutMs: 600, retries: 3, gapMs: 0, inFlight: 4, workMs: 2 },
  memory: { volatileWrites: true, commitTakesMs: 180, deviceTimer: { maxSeconds: 900 } },
  slots: { first: 1, count: 8, emptyMode: 0 },
  modes: { first: 1, count: 32 },
  timingTakesEffect: "recall",
  output: {
    kinds: ["RGB", "YPbPr"],
    sync: [
      { kind: "composite", vpp: 2.1, sourceOhm: 75 }, { kind: "separate", vpp: 3.3, sourceOhm: 75 },
      { kind: "onGreen", vpp: 0.6, sourceOhm: 75 }, { kind: "onLuma", vpp: 0.6, sourceOhm: 75 },
    ],
    outsideRaster: "refuses", clock: "free",
    idle: { switchOn: IDLE_480P60, withoutInput: IDLE_480P60, afterReset: IDLE_480P60 },
    interlace: true, horizontalMultiple: 1, maxLineTotal: 4095, maxFieldLines: 1500,
  },
  inputs: [
    { name: "digital-1", label: "digital 1", accepts: digitalFormats },
    { name: "digital-2", label: "digital 2", accepts: digitalFormats },
    { name: "analogue-1", label: "analogue 1", accepts: analogueFormats },
    { name: "component-1", label: "component 1", accepts: analogueFormats },
  ],
  status: {
    identity: query("*IDN?", "{maker:text40},{model:text40},{serial:text40},{firmware:text16}"),
    operationComplete: query("*OPC?", "{complete:int}"),
    errorQueue: query("SYST:ERR?", "{code:int},\"{message:text60}\""),
    bootCount: query("SYST:BOOT?", "SYST:BOOT={count:int}"),
    activeSlot: query("SLOT:ACTIVE?", "SLOT:ACTIVE={slot:int}"),
    committed: query("MEM:COMMITTED?", "MEM:COMMITTED={committed:int}"),
    rasterOut: query("OUT:RASTER?", `OUT:RASTER=${RASTER_FIELDS}`),
    arriving: query("IN:FORMAT?", "IN:FORMAT={input:word},{activePx:int},{activeLines:int},{interlaced:int},{fieldRateMilliHz:fixed3},{locked:int}"),
  },
  actions: {
    recall: query("*RCL {slot:int}", "*RCL={slot:int}"),
    commit: query("MEM:COMMIT", "MEM:COMMIT=OK"),
    armTimer: query("TIMER:ARM {seconds:int}", "TIMER:ARM={seconds:int}"),
    extendTimer: query("TIMER:EXTEND {seconds:int}", "TIMER:EXTEND={seconds:int}"),
    confirmTimer: query("TIMER:CONFIRM", "TIMER:CONFIRM=OK"),
    disarmTimer: query("TIMER:DISARM", "TIMER:DISARM=OK"),
  },
  settings: [...everywhereSettings, ...slotSettings, ...modeSettings],
  factory,
  boot: { takesMs: 300, chatter: ["LF-8 starting", "memory ok, output idle"] },
});
