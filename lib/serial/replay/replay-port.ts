import type { Clock } from "@/lib/serial/clock";
import type { SerialOpenOptions, SerialPortLike } from "@/lib/serial/port";
import type { Recording } from "@/lib/serial/recording";
import { createSimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createReplayDevice, type ReplayDevice, type ReplayOptions } from "./replay-device";

/** A recording behind a port, which a session talks to as to a device. */
export type ReplayPort = { readonly port: SerialPortLike; readonly device: ReplayDevice };

/**
 * Puts a recording on a port. At the first byte that the driver says differently the port is lost, as if unplugged,
 * and `device.outcome` says where.
 * @param transport the line settings of the driver that the recording was made with
 */
export function createReplayPort(recording: Recording, options: ReplayOptions & { readonly clock: Clock; readonly transport: SerialOpenOptions }): ReplayPort {
  const device = createReplayDevice(recording, options);
  const plug = createSimulatedDevicePort({ model: device, transport: options.transport, clock: options.clock, pacing: "none" });
  const { port } = plug;
  device.onDiffers(() => plug.unplug());
  return { port, device };
}
