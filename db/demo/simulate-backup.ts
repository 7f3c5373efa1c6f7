import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { TakenBackup } from "@/lib/serial/backup/types";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import { openSession } from "@/lib/serial/session/open-session";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createWireLog } from "@/lib/serial/wire-log";
import type { SourceFormat } from "@/lib/timing/raster";

export type DemoState = {
  /** Over the driver's factory values. */
  readonly values: NativeValues;
  readonly serialNumber: string;
  readonly firmware: string;
  readonly activeSlot: number;
  readonly source: SourceFormat | null;
};

/** A backup as the product takes one: over a wire, from a simulated device in that state, in virtual time. */
export async function simulateBackup(driver: CompiledDriver, state: DemoState): Promise<TakenBackup> {
  const clock = createVirtualClock();
  const model = createDeviceModel(driver, { clock, ...state });
  const { transport } = driver.definition;
  const { port } = createSimulatedDevicePort({ model, transport, clock, pacing: "none" });
  const opened = await clock.run(openSession({ port, driver, clock, wireLog: createWireLog({ clock }) }));
  if (!opened.ok) throw new Error(`The demo device did not answer: ${JSON.stringify(opened.error)}`);
  const taken = await clock.run(takeBackup(opened.value.session, driver));
  if (!taken.ok) throw new Error(`The demo device was not read: ${taken.error.message}`);
  await clock.run(opened.value.session.close());
  return taken.value;
}
