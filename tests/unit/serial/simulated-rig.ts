import { compileDriver } from "@/lib/serial/driver/compile";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { createVirtualClock, type VirtualClock } from "@/lib/serial/clock/virtual-clock";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceIdentity, DeviceSession } from "@/lib/serial/session/types";
import { createDeviceModel, type DeviceModelOptions, type SimulatedDevice } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort, type SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createWireLog, type WireLog } from "@/lib/serial/wire-log";

/** A simulated device on a simulated wire under a virtual clock, with a session that is ready. */
export type Rig = {
  readonly clock: VirtualClock;
  readonly driver: CompiledDriver;
  readonly device: SimulatedDevice;
  readonly plug: SimulatedDevicePort;
  readonly wireLog: WireLog;
  readonly session: DeviceSession;
  readonly identity: DeviceIdentity;
};

export function compiled(definition: DriverDefinition): CompiledDriver {
  const driver = compileDriver(definition);
  if (!driver.ok) throw new Error(driver.error.map(({ path, message }) => `${path}: ${message}`).join("\n"));
  return driver.value;
}

export const lf8 = compiled(lanternfieldLf8);

/** A device and its wire, without a session. */
export function plugIn(
  driver: CompiledDriver = lf8, options: Omit<DeviceModelOptions, "clock"> = {}, clock = createVirtualClock(), pacing: "wire" | "none" = "wire",
): Omit<Rig, "session" | "identity"> {
  const device = createDeviceModel(driver, { clock, ...options });
  const plug = createSimulatedDevicePort({ model: device, transport: driver.definition.transport, clock, pacing });
  return { clock, driver, device, plug, wireLog: createWireLog({ clock }) };
}

/** A device, its wire and a ready session. @param pacing `none` where many are made and the line's own time does not matter */
export async function connect(driver: CompiledDriver = lf8, options: Omit<DeviceModelOptions, "clock"> = {}, pacing: "wire" | "none" = "wire"): Promise<Rig> {
  const parts = plugIn(driver, options, createVirtualClock(), pacing);
  const { clock, plug, wireLog } = parts;
  const opened = await clock.run(openSession({ port: plug.port, driver, clock, wireLog }));
  if (!opened.ok) throw new Error(`The session did not open: ${JSON.stringify(opened.error)}`);
  return { ...parts, ...opened.value };
}
