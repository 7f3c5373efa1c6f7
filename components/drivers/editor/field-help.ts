/** What a field of a driver definition means. `[]` stands for any entry of a list, `*` for any name. */
export type FieldHelp = { readonly path: string; readonly words: string };

const fields = (at: string, words: Readonly<Record<string, string>>): readonly FieldHelp[] =>
  Object.entries(words).map(([name, text]) => ({ path: at === "" ? name : `${at}.${name}`, words: text }));

const registers = (at: string) =>
  fields(at, {
    register: "Register of the first slot or mode, counted from 0.",
    stride: "Registers from one slot or mode to the next.",
    words: "16-bit registers that the value takes.",
    signed: "Two's complement.",
    wordOrder: "Which of several registers holds the high bits.",
    encoding: "integer, or ascii for a text of two characters a register.",
    table: "holding (function 03, can be written) or input (function 04).",
    block: "Name of the block, as the protocol lists it.",
    byteOffset: "First byte of the value in the block, counted from 0.",
    bytes: "Bytes that the value takes.",
  });

const timing = (at: string) => [
  { path: at, words: "The raster that is put out then, or unknown." },
  ...fields(at, { pixelClockHz: "Pixel clock.", interlaced: "Two fields a frame.", equalFields: "Both fields of an interlaced frame have as many lines, without the half line.", horizontal: "Pixels of a line.", vertical: "Lines of a field." }),
  ...["horizontal", "vertical"].flatMap((way) =>
    fields(`${at}.${way}`, { active: "Picture.", frontPorch: "From the picture to sync.", sync: "Length of sync.", backPorch: "From sync to the picture.", polarity: "positive or negative." }),
  ),
];

const operation = (at: string) => [
  { path: at, words: "A query or an order by its name; one that is missing, the device does not have." },
  ...fields(at, {
    kind: "text, modbus or packet: as the protocol.",
    request: "Template of what is sent: words, and holes as {slot:int}.",
    reply: "Template of the answer. Its holes are the fields that are read.",
    fields: "Named registers or places in a block.",
    value: "What an order without an argument writes.",
  }),
  ...fields(`${at}.fields[]`, { name: "Name of the field, as status and orders know it.", field: "Where it stands." }),
  ...registers(`${at}.fields[].field`),
];

const exchange = (at: string) => [
  { path: at, words: "Missing: it cannot be done." },
  ...fields(at, {
    request: "Template of what is sent. Holes: {slot:int}, {mode:int}, {value:int}, {value:fixed1}, {name:text16}, {value:word}.",
    reply: "Template of the answer, with the same holes.",
  }),
];

/** Every field of a definition, in its order. */
export const FIELD_HELP: readonly FieldHelp[] = [
  ...fields("", {
    format: "Always backporch-driver.",
    formatVersion: "Always 1.",
    maker: "As the device says it when it is asked who it is.",
    model: "As the device says it when it is asked who it is.",
    slug: "Names the driver in addresses: small letters, digits, hyphens. It never changes.",
    version: "Three numbers, as 1.2.0. A published version never changes.",
    firmware: "The firmware that this version is for.",
    transport: "How the serial line is set.",
    protocol: "How requests and answers are put into bytes.",
    pace: "How fast the device takes requests.",
    memory: "What becomes of a write at switch-off.",
    slots: "Numbered memories.",
    modes: "Output rasters that slots refer to.",
    timingTakesEffect: "write: each number at once; block: with the last of a block; recall: when a slot is made active.",
    output: "What the device puts out.",
    inputs: "Inputs, with the formats each takes.",
    status: "Queries whose answer is no setting.",
    actions: "Orders.",
    settings: "Everything that can be read or written.",
    factory: "What a new device holds where that differs from a setting's initial value, by key with the number put in.",
    boot: "How the device starts.",
  }),
  ...fields("firmware", { min: "Lowest version.", max: "Highest version.", updateErasesSlots: "An update of the firmware loses the slots." }),
  ...fields("transport", {
    baudRate: "300 to 4 000 000.",
    dataBits: "7 or 8.",
    stopBits: "1 or 2.",
    parity: "none, even or odd.",
    flowControl: "none or hardware (RTS and CTS).",
  }),
  ...fields("protocol", {
    kind: "text, modbus-rtu or packet.",
    lineEnd: "What ends a line.",
    check: "Check field at the end of a line: hex digits after *.",
    echo: "The device repeats each request.",
    uncheckedRequests: "Requests that are taken, and answered, without the check.",
    refusalReply: "Template of a no. {header:…} names the request.",
    busyReply: "Template of “ask again later”.",
    maxLineBytes: "Longest line.",
    unit: "Address of the device, 1 to 247.",
    maxReadGap: "Registers between two wanted ones that may be read with them.",
    start: "Bytes that begin a packet.",
    lengthBytes: "Bytes of the length.",
    byteOrder: "big or little.",
    checksum: "By its catalogue name.",
    stuffing: "Bytes are stuffed as RFC 1055 says.",
    blocks: "Blocks that are read and written whole.",
  }),
  ...fields("protocol.check", { algorithm: "By its catalogue name.", requiredInReplies: "An answer without it is no answer." }),
  ...fields("protocol.blocks[]", {
    name: "Settings refer to it.",
    number: "Number on the wire.",
    bytes: "Length.",
    repeats: "once, or one for each of the slots or modes.",
  }),
  ...fields("pace", {
    replyTimeoutMs: "An answer that is not there by then is missing.",
    retries: "How often a query is asked again.",
    gapMs: "Silence between two requests.",
    inFlight: "Requests that may be under way at once: above 1 only where answers name what they answer.",
    workMs: "Time that the device takes for a request.",
    writeSettleMs: "Time that it needs after a write.",
  }),
  ...fields("memory", {
    volatileWrites: "A write is lost at switch-off until it is stored by an order.",
    commitTakesMs: "How long storing takes.",
    deviceTimer: "The device can put old values back by itself.",
  }),
  ...fields("memory.deviceTimer", { maxSeconds: "Longest time that it can be set to." }),
  ...fields("slots", { first: "Lowest number.", count: "How many.", emptyMode: "Mode number that says: this slot is empty." }),
  ...fields("modes", { first: "Lowest number.", count: "How many." }),
  ...fields("output", {
    kinds: "RGB, YPbPr.",
    sync: "Kinds of sync, with their level.",
    outsideRaster: "A picture past the raster's edge: refuses, or cuts.",
    clock: "free, or locked to the input.",
    idle: "What is put out while no slot is.",
    lineFilter: "How lines are scaled, if known.",
    interlace: "It can put out interlaced rasters.",
    horizontalMultiple: "Every length along a line is a multiple of so many pixels.",
    maxLineTotal: "Longest line with blanking, in pixels.",
    maxFieldLines: "Most lines of a field with blanking.",
  }),
  ...fields("output.sync[]", { kind: "separate, composite, onGreen or onLuma.", vpp: "Level into its load, volts peak to peak.", sourceOhm: "Source resistance." }),
  ...fields("output.idle", { switchOn: "", withoutInput: "", afterReset: "" }).map(({ path }) => ({ path, words: "The raster that is put out then, or unknown." })),
  ...["switchOn", "withoutInput", "afterReset"].flatMap((when) => timing(`output.idle.${when}`).slice(1)),
  ...fields("inputs[]", { name: "As settings hold it.", label: "As pages show it.", range: "full or limited, where the input has one.", accepts: "Formats that it locks to, does not lock to, or nobody knows." }),
  ...fields("inputs[].accepts[]", {
    activeLines: "Least and most lines.",
    interlaced: "Only interlaced, only progressive, or (missing) both.",
    fieldRateHz: "Least and greatest field rate.",
    locks: "locks, does-not-lock or unknown.",
  }),
  ...operation("status.*"),
  ...operation("actions.*"),
  ...fields("settings[]", {
    key: "Neutral path with [*] for the slot or mode, or native.… for what no profile has a word for.",
    label: "As pages show it.",
    value: "What it can hold.",
    initial: "What a new device holds, as the device says it.",
    wire: "How it is read and written.",
  }),
  ...fields("settings[].value", {
    type: "integer, choice or text.",
    min: "Least native value.",
    max: "Greatest native value.",
    step: "Native values count from the least in such steps.",
    scale: "Neutral value = native value × scale + offset.",
    offset: "Neutral value = native value × scale + offset.",
    unit: "Of the neutral value, as pages show it.",
    choices: "Everything that it can be.",
    maxLength: "Longest text.",
    characters: "Characters that the device takes.",
  }),
  ...fields("settings[].value.choices[]", { native: "As the device says it.", neutral: "As a profile says it.", label: "As pages show it." }),
  ...fields("settings[].wire", {
    kind: "text, modbus or packet: as the protocol.",
    field: "Where it stands.",
    readable: "It can be asked.",
    writable: "It can be set.",
  }),
  ...exchange("settings[].wire.read"),
  ...exchange("settings[].wire.write"),
  ...registers("settings[].wire.field"),
  { path: "factory.*", words: "A native value of one slot or mode." },
  ...fields("boot", { takesMs: "Time before it answers.", chatter: "Lines, or bytes as text, that it sends meanwhile." }),
];

const byPath = new Map(FIELD_HELP.map((help) => [help.path, help]));

/** A path as the table writes it. */
function patternOf(path: string): string {
  if (path.startsWith("factory.")) return "factory.*";
  return path.replace(/\[\d+\]/gu, "[]").replace(/^(status|actions)\.[^.[]+/u, "$1.*");
}

const places = new Map(FIELD_HELP.map(({ path }, index) => [path, index]));

/** The place of a field among all fields of a definition, by which they are written in their order. Infinity: no such field. */
export function fieldPlace(path: string): number {
  return places.get(patternOf(path)) ?? Infinity;
}

/** Ways that a path may stand in the table, the nearest first, then those of what it lies in. */
function patternsOf(path: string): readonly string[] {
  const named = patternOf(path);
  if (named === "factory.*") return [named, "factory"];
  const parts = named.split(/(?=\.|\[\])/u);
  return parts.map((_, index) => parts.slice(0, parts.length - index).join(""));
}

/** What the field at a path means, or the nearest field around it. Null: nothing is known of it. */
export function helpFor(path: string): FieldHelp | null {
  for (const pattern of patternsOf(path)) {
    const found = byPath.get(pattern);
    if (found !== undefined) return found;
  }
  return null;
}
