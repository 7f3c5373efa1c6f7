import { z } from "zod";
import type { Clock } from "@/lib/serial/clock";
import { createTimeline } from "@/lib/serial/clock/timeline";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { createDeviceModel, type SimulatedDevice as DeviceModel } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort, type SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";

/** A simulated device of this page: its model, and the plug it hangs on. */
export type SimulatedDevice = { readonly model: DeviceModel; readonly plug: SimulatedDevicePort };

const memorySchema = z.object({ bootCount: z.number().int(), values: z.record(z.string(), z.union([z.number(), z.string()])) });

function memoryKey(slug: string): string {
  return `backporch.simulated.${slug}`;
}

function rememberedMemory(storage: Storage, slug: string): z.infer<typeof memorySchema> | null {
  const text = storage.getItem(memoryKey(slug));
  if (text === null) return null;
  try {
    const parsed = memorySchema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : null;
  } catch (error) {
    // Somebody else's text under our name: a new device is as good.
    if (error instanceof SyntaxError) return null;
    throw error;
  }
}

/**
 * Plugs in a simulated device, over a wire as slow as the real one.
 *
 * Its non-volatile memory stays in this browser, as a real device's stays in the device: a reload is a power cut to it.
 */
export function plugInSimulated(driver: CompiledDriver, clock: Clock, storage: Storage): SimulatedDevice {
  const { slug, transport } = driver.definition;
  const memory = rememberedMemory(storage, slug);
  // Else each stage of a request would wait for a timer of its own, and a browser makes those 4 ms long.
  const timeline = createTimeline(clock);
  const model = createDeviceModel(driver, { clock: timeline, values: memory?.values, bootCount: memory ? memory.bootCount + 1 : undefined });
  model.onChange(() => storage.setItem(memoryKey(slug), JSON.stringify({ bootCount: model.bootCount, values: model.stored })));
  return { model, plug: createSimulatedDevicePort({ model, transport, clock, timeline, pacing: "wire" }) };
}
