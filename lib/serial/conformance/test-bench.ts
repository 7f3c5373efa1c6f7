import { createVirtualClock, type VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceSession } from "@/lib/serial/session/types";
import { createDeviceModel, type SimulatedDevice } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort, type SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createWireLog, type WireLog } from "@/lib/serial/wire-log";
import type { Budget, ConformanceBounds } from "./bounds";

/** Enough to tell what happened last; the suite reads no log. */
const LOG_ENTRIES = 64;

/** A device of the driver on a simulated line, with a session that is ready, all in virtual time. */
export type TestBench = {
  readonly driver: CompiledDriver;
  readonly device: SimulatedDevice;
  readonly plug: SimulatedDevicePort;
  readonly session: DeviceSession;
  readonly clock: VirtualClock;
  /** Lets virtual time pass until `promise` settles, and counts what it cost. Throws `BoundPassed`. */
  run<T>(promise: Promise<T>): Promise<T>;
  /** Ends the session. @returns what was left behind, in one sentence; null: nothing */
  end(): Promise<string | null>;
};

export type Surroundings = { readonly driver: CompiledDriver; readonly bounds: ConformanceBounds; readonly budget: Budget };

type BenchOptions = {
  readonly values?: NativeValues;
  /** `wire`: every byte at its own moment, for faults that strike one. */
  readonly pacing?: "wire" | "none";
};

/** Makes a device as new (with `values` over that) and opens a session. Errors: why it did not open. */
export async function openBench({ driver, bounds, budget }: Surroundings, { values = {}, pacing = "none" }: BenchOptions = {}): Promise<TestBench | string> {
  budget.check();
  const clock = createVirtualClock();
  const wireLog: WireLog = createWireLog({ clock, maxEntries: LOG_ENTRIES });
  const device = createDeviceModel(driver, { clock, values });
  const plug = createSimulatedDevicePort({ model: device, transport: driver.definition.transport, clock, pacing });
  let spent = { exchanges: 0, bytes: 0 };

  function account(): void {
    const { hostToDeviceBytes, deviceToHostBytes } = plug.counts;
    const now = { exchanges: wireLog.exchangeCount, bytes: hostToDeviceBytes + deviceToHostBytes };
    const more = { exchanges: now.exchanges - spent.exchanges, bytes: now.bytes - spent.bytes };
    spent = now;
    budget.spend(more.exchanges, more.bytes);
  }

  async function run<T>(promise: Promise<T>): Promise<T> {
    const result = await clock.run(promise, { limitMs: bounds.stepVirtualMs });
    account();
    return result;
  }

  const opened = await run(openSession({ port: plug.port, driver, clock, wireLog }));
  if (!opened.ok) return `The session did not open: ${"detail" in opened.error ? opened.error.detail : opened.error.code === "other-device" ? `${opened.error.found} answered, not ${opened.error.wanted}.` : opened.error.code}`;
  const { session } = opened.value;
  return {
    driver, device, plug, session, clock, run,
    async end() {
      plug.setFault(null);
      plug.release();
      device.setFault(null);
      await run(session.close());
      // A late answer and the device's own work end too.
      await clock.advance(driver.definition.memory.commitTakesMs + driver.definition.boot.takesMs + 10_000);
      return clock.pendingTimers() === 0 ? null : `${clock.pendingTimers()} timers are left after the session was closed.`;
    },
  };
}
