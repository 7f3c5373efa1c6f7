import { expect, test } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { DeviceModel } from "@/lib/serial/simulator/device-model-interface";
import { createSimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import type { SimulatedDeviceOptions, SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";

/** A device that keeps each byte with its moment and says back what it hears: a loopback plug with a memory. */
export class Loopback implements DeviceModel {
  readonly heard: { readonly byte: number; readonly atMs: number }[] = [];
  restarts = 0;
  echoes = true;
  readonly #clock: VirtualClock;
  #send: (bytes: Uint8Array) => void = () => undefined;

  constructor(clock: VirtualClock) {
    this.#clock = clock;
  }

  attach(send: (bytes: Uint8Array) => void): void {
    this.#send = send;
  }

  receive(bytes: Uint8Array): void {
    for (const byte of bytes) this.heard.push({ byte, atMs: this.#clock.nowMs() });
    if (this.echoes) this.#send(bytes);
  }

  say(...bytes: number[]): void {
    this.#send(Uint8Array.from(bytes));
  }

  powerCycle(): void {
    this.restart();
  }

  restart(): void {
    this.restarts += 1;
  }
}

export const LINE = { baudRate: 115_200, dataBits: 8, stopBits: 1, parity: "none" } as const;
/** 1 start, 8 data, 1 stop bit at 115 200 baud. */
export const BYTE_MS = 10_000 / 115_200;

export type DeviceScene = {
  readonly clock: VirtualClock;
  readonly device: Loopback;
  readonly adapter: SimulatedDevicePort;
};

/** A test with a loopback device on a paced line, in virtual time; at its end no timer may be left. */
export function deviceTest(
  name: string,
  body: (scene: DeviceScene) => Promise<void>,
  options: Partial<SimulatedDeviceOptions> = {},
): void {
  test(name, async () => {
    const clock = createVirtualClock();
    const device = new Loopback(clock);
    const adapter = createSimulatedDevicePort({ model: device, transport: LINE, clock, pacing: "wire", ...options });
    await clock.run(body({ clock, device, adapter }), { limitMs: 60_000 });
    await clock.advance(1);
    expect(clock.pendingTimers()).toBe(0);
  });
}

export function wait(clock: VirtualClock, ms: number): Promise<void> {
  return new Promise((resolve) => clock.after(ms, resolve));
}

/** Writes `bytes` and lets the writer go. */
export async function write(adapter: SimulatedDevicePort, bytes: Uint8Array): Promise<void> {
  const writer = adapter.port.writable!.getWriter();
  await writer.write(bytes);
  writer.releaseLock();
}
