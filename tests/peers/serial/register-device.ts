import { DRIVER_FORMAT, driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";

/** Holding registers of `c/register-server.c`. */
export const REGISTERS = 200;

/** What a register of `c/register-server.c` holds at first. */
export function registerAtStart(index: number): number {
  return (index * 40_503 + 7) % 65_536;
}

const input = (register: number, words: number) => ({ register, words, table: "input", encoding: "ascii" });

/** A driver for `c/register-server.c`: each register is a setting. */
export const registerDevice: DriverDefinition = driverDefinitionSchema.parse({
  format: DRIVER_FORMAT, formatVersion: 1,
  maker: "Testbench", model: "R200", slug: "testbench-r200", version: "1.0.0",
  firmware: { min: "1.0", max: "1.0", updateErasesSlots: false },
  transport: { baudRate: 115_200, dataBits: 8, stopBits: 1, parity: "even", flowControl: "none" },
  protocol: { kind: "modbus-rtu", unit: 9, maxReadGap: 0 },
  pace: { replyTimeoutMs: 2000, retries: 1, gapMs: 0, inFlight: 1, workMs: 0 },
  memory: { volatileWrites: true },
  slots: { first: 1, count: 1 },
  modes: { first: 1, count: 1 },
  timingTakesEffect: "write",
  output: {
    kinds: ["RGB"], sync: [{ kind: "composite" }], outsideRaster: "cuts", clock: "free",
    idle: { switchOn: "unknown", withoutInput: "unknown", afterReset: "unknown" }, interlace: false,
  },
  inputs: [{ name: "digital-1", label: "digital", accepts: [] }],
  status: {
    identity: { kind: "modbus", fields: [{ name: "maker", field: input(0, 8) }, { name: "model", field: input(8, 4) }, { name: "firmware", field: input(12, 2) }] },
    activeSlot: { kind: "modbus", fields: [{ name: "slot", field: { register: 0 } }] },
  },
  actions: {},
  settings: Array.from({ length: REGISTERS }, (_, register) => ({
    key: `native.r${register}`, label: `Register ${register}`, value: { type: "integer", min: 0, max: 65_535 }, initial: 0,
    wire: { kind: "modbus", field: { register } },
  })),
});
