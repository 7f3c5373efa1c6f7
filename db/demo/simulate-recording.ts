import type { DemoState } from "@/db/demo/simulate-backup";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { saveRecording } from "@/lib/serial/recording";
import { openSession } from "@/lib/serial/session/open-session";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createWireLog } from "@/lib/serial/wire-log";

/**
 * A recording as the bench saves one, struck out unless told otherwise: a session over a wire with a simulated device,
 * everything read, each of the named slots made active.
 */
export async function simulateRecording(
  driver: CompiledDriver,
  {
    at,
    slots,
    strikeOut = true,
    ...state
  }: DemoState & { readonly at: string; readonly slots: readonly number[]; readonly strikeOut?: boolean },
): Promise<string> {
  const clock = createVirtualClock({ wallStartMs: Date.parse(at) });
  const model = createDeviceModel(driver, { clock, ...state });
  const { transport } = driver.definition;
  const { port } = createSimulatedDevicePort({ model, transport, clock, pacing: "none" });
  const wireLog = createWireLog({ clock });
  const opened = await clock.run(openSession({ port, driver, clock, wireLog }));
  if (!opened.ok) throw new Error(`The demo device did not answer: ${JSON.stringify(opened.error)}`);
  const { session } = opened.value;
  const taken = await clock.run(takeBackup(session, driver));
  if (!taken.ok) throw new Error(`The demo device was not read: ${taken.error.message}`);
  for (const slot of slots) {
    const recalled = await clock.run(session.recall(slot));
    const active = await clock.run(session.activeSlot());
    if (!recalled.ok || !active.ok) throw new Error(`The demo device did not make slot ${slot} active`);
  }
  await clock.run(session.close());
  return saveRecording(driver, wireLog.entries(), { strikeOut });
}
