import { expect, test } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { SerialLike, SerialPortLike } from "@/lib/serial/port";
import { createBenchOn } from "@/tests/peers/web-serial-bench";
import type { FarEnd, SerialBench } from "@/tests/fixtures/web-serial-contract";

export type BenchScene = {
  readonly bench: SerialBench;
  readonly serial: EventTarget & SerialLike;
  readonly clock: VirtualClock;
  /** Plugs one adapter in and finds its port. */
  readonly plug: (
    ...how: Parameters<SerialBench["attach"]>
  ) => Promise<{ port: SerialPortLike & EventTarget; far: FarEnd }>;
};

/** A test on the contract's bench in virtual time; at its end no timer may be left. */
export function benchTest(name: string, body: (scene: BenchScene) => Promise<void>): void {
  test(name, async () => {
    const clock = createVirtualClock();
    const bench = createBenchOn(clock);
    const serial = bench.serial as EventTarget & SerialLike;
    const plug: BenchScene["plug"] = async (...how) => {
      const far = bench.attach(...how);
      const port = (await serial.getPorts()).at(-1);
      if (!port) throw new Error("No port is listed.");
      return { port: port as SerialPortLike & EventTarget, far };
    };
    await clock.run(body({ bench, serial, clock, plug }), { limitMs: 60_000 });
    await clock.advance(1);
    expect(clock.pendingTimers()).toBe(0);
  });
}

/** Expects a DOMException of this name. */
export async function refusesWith(name: string, promise: Promise<unknown>): Promise<void> {
  const error = await promise.then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(DOMException);
  expect((error as DOMException).name).toBe(name);
}

/** Reads until at least `length` bytes came. */
export async function readBytes(reader: ReadableStreamDefaultReader<Uint8Array>, length: number): Promise<Uint8Array> {
  const bytes: number[] = [];
  while (bytes.length < length) {
    const { value, done } = await reader.read();
    if (done) break;
    bytes.push(...value);
  }
  return Uint8Array.from(bytes);
}

/** Receives at the far end until at least `length` bytes came. */
export async function receiveBytes(far: FarEnd, length: number): Promise<Uint8Array> {
  const bytes: number[] = [];
  while (bytes.length < length) {
    const { value, done } = await far.receive();
    if (done || !value) break;
    bytes.push(...value);
  }
  return Uint8Array.from(bytes);
}

export function numbered(length: number): Uint8Array<ArrayBuffer> {
  return Uint8Array.from({ length }, (_, index) => index & 0xff);
}

/** Takes a buffer away from its owner, as a transfer does. */
export function detach(bytes: Uint8Array<ArrayBuffer>): void {
  structuredClone(bytes.buffer, { transfer: [bytes.buffer] });
}

export const EIGHT = Uint8Array.from([1, 2, 3, 4, 5, 6, 7, 8]);
