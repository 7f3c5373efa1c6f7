import { describe, expect, test } from "vitest";
import type { Clock } from "@/lib/serial/clock";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { ByteQueue } from "@/lib/serial/simulator/byte-queue";
import { bitsPerCharacter, characterMs } from "@/lib/serial/protocols/character-time";
import { PacedLine } from "@/lib/serial/simulator/wire";
import { anyOf, faultAtByte } from "@/lib/serial/simulator/wire-fault";
import type { ByteFault, WireEvent, WireFault } from "@/lib/serial/simulator/wire-fault";

type Arrival = { readonly byte: number; readonly atMs: number };

function line(clock: Clock, fault: WireFault | null = null, grainMs = 0) {
  const source = new ByteQueue();
  const arrivals: Arrival[] = [];
  const events: WireEvent[] = [];
  const paced = new PacedLine({
    clock,
    direction: "device-to-host",
    source: {
      get available() {
        return source.length;
      },
      takeByte: () => source.takeByte(),
    },
    deliver: (bytes) => bytes.forEach((byte) => arrivals.push({ byte, atMs: clock.nowMs() })),
    fault: () => fault,
    grainMs,
    onEvent: (event) => events.push(event),
  });
  paced.setPace(1);
  const put = (...bytes: number[]): void => {
    source.push(Uint8Array.from(bytes));
    paced.wake();
  };
  return { paced, source, arrivals, events, put };
}

async function after(fault: ByteFault, bytes: number[], ms = 100) {
  const clock = createVirtualClock();
  const single = faultAtByte("device-to-host", 1, fault);
  const scene = line(clock, single);
  scene.put(...bytes);
  await clock.advance(ms);
  return { ...scene, clock, fired: single.fired };
}

describe("a character", () => {
  // Asynchronous framing: one start bit, the data, a parity bit if any, the stop bits. Common practice, no source.
  test("takes its start, data, parity and stop bits", () => {
    expect(bitsPerCharacter({})).toBe(10);
    expect(bitsPerCharacter({ dataBits: 8, parity: "even", stopBits: 1 })).toBe(11);
    expect(bitsPerCharacter({ dataBits: 7, parity: "none", stopBits: 2 })).toBe(10);
    // Modbus over Serial Line V1.02, 2.5.1: 11 bits a character; 38 400 baud gives 0.286 ms.
    expect(characterMs({ baudRate: 38_400, parity: "even" })).toBeCloseTo(0.28646, 5);
  });
});

describe("a paced line", () => {
  test("brings each byte one character after the one before", async () => {
    const clock = createVirtualClock();
    const { put, arrivals } = line(clock);
    put(10, 11, 12);
    await clock.advance(1.5);
    put(13);
    await clock.advance(8.5);
    put(14);
    await clock.advance(2);
    expect(arrivals).toEqual([
      { byte: 10, atMs: 1 },
      { byte: 11, atMs: 2 },
      { byte: 12, atMs: 3 },
      { byte: 13, atMs: 4 },
      { byte: 14, atMs: 11 },
    ]);
    expect(clock.pendingTimers()).toBe(0);
  });

  test("is jerky but no slower where timers are coarse", async () => {
    const clock = createVirtualClock();
    // As in a hidden tab or a clamped one: no timer sooner than 16 ms.
    const coarse: Clock = { ...clock, after: (ms, fire) => clock.after(Math.max(16, ms), fire) };
    const { put, arrivals, paced } = line(coarse);
    paced.setPace(0.1);
    put(...new Array<number>(1000).fill(7));
    await clock.advance(200);
    expect(arrivals).toHaveLength(1000);
    // 1000 bytes of 0.1 ms are 100 ms; the last timer comes at most 16 ms late.
    expect(arrivals.at(-1)?.atMs).toBeLessThanOrEqual(116);
  });

  test("with a grain brings bytes in groups, none later than the grain and none early", async () => {
    const clock = createVirtualClock();
    const { put, arrivals } = line(clock, null, 3);
    put(0, 1, 2, 3, 4, 5);
    await clock.advance(20);
    put(6);
    await clock.advance(20);
    expect(arrivals.map(({ atMs }) => atMs)).toEqual([4, 4, 4, 4, 6, 6, 21]);
  });

  test("with no pace brings bytes before any time passes", async () => {
    const clock = createVirtualClock();
    const { put, arrivals, paced } = line(clock);
    paced.setPace(0);
    put(1, 2, 3);
    expect(arrivals).toEqual([]);
    await clock.advance(0);
    expect(arrivals.map(({ byte }) => byte)).toEqual([1, 2, 3]);
    expect(clock.nowMs()).toBe(0);
  });

  test("sends nothing that was thrown away meanwhile", async () => {
    const clock = createVirtualClock();
    const { put, arrivals, source } = line(clock);
    put(1, 2, 3);
    await clock.advance(1);
    source.clear();
    await clock.advance(10);
    put(4);
    await clock.advance(10);
    expect(arrivals.map(({ byte }) => byte)).toEqual([1, 4]);
  });
});

describe("a fault at one byte", () => {
  const cases: [ByteFault, number[]][] = [
    [{ kind: "drop" }, [10, 12]],
    [{ kind: "flip", mask: 0x80 }, [10, 11 ^ 0x80, 12]],
    [{ kind: "insert", byte: 99 }, [10, 99, 11, 12]],
    [{ kind: "duplicate" }, [10, 11, 11, 12]],
  ];
  for (const [fault, bytes] of cases) {
    test(`${fault.kind} touches that byte alone`, async () => {
      const { arrivals, fired } = await after(fault, [10, 11, 12]);
      expect(arrivals.map(({ byte }) => byte)).toEqual(bytes);
      expect(fired).toBe(true);
    });
  }

  test("delay makes it and all after it later", async () => {
    const { arrivals } = await after({ kind: "delay", delayMs: 20 }, [10, 11, 12]);
    expect(arrivals).toEqual([
      { byte: 10, atMs: 1 },
      { byte: 11, atMs: 22 },
      { byte: 12, atMs: 23 },
    ]);
  });

  test("stall stops the line until it is released", async () => {
    const { arrivals, paced, clock } = await after({ kind: "stall" }, [10, 11, 12]);
    expect(arrivals.map(({ byte }) => byte)).toEqual([10]);
    expect(clock.pendingTimers()).toBe(0);
    paced.release();
    await clock.advance(5);
    expect(arrivals.map(({ byte }) => byte)).toEqual([10, 11, 12]);
  });

  test("unplug, restart and the port's own errors happen after the bytes before it", async () => {
    for (const fault of [
      { kind: "unplug" },
      { kind: "restart" },
      { kind: "write-error" },
      { kind: "read-error", fault: "parity" },
    ] as const) {
      const { arrivals, events } = await after(fault, [10, 11]);
      expect(arrivals.map(({ byte }) => byte)).toEqual([10]);
      expect(events.map(({ kind }) => kind)).toEqual([fault.kind]);
    }
  });

  test("has not fired where the byte was never reached, so a sweep knows its end", async () => {
    const { arrivals, fired } = await after({ kind: "drop" }, [10]);
    expect(arrivals.map(({ byte }) => byte)).toEqual([10]);
    expect(fired).toBe(false);
  });

  test("leaves the other direction alone", async () => {
    const clock = createVirtualClock();
    const other = faultAtByte("host-to-device", 0, { kind: "drop" });
    const { put, arrivals } = line(clock, other);
    put(1);
    await clock.advance(5);
    expect(arrivals).toHaveLength(1);
    expect(other.fired).toBe(false);
  });

  test("can be one of two", async () => {
    const clock = createVirtualClock();
    const faults = [0, 2].map((index) => faultAtByte("device-to-host", index, { kind: "drop" }));
    const { put, arrivals } = line(clock, anyOf(faults));
    put(1, 2, 3);
    await clock.advance(5);
    expect(arrivals.map(({ byte }) => byte)).toEqual([2]);
    expect(faults.every(({ fired }) => fired)).toBe(true);
  });
});
