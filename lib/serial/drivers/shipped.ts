import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "./lanternfield-lf8";

/** The drivers that come with the project, each for an invented device. */
export const shippedDrivers: readonly DriverDefinition[] = [lanternfieldLf8];

/** A shipped driver by its slug. */
export function shippedDriver(slug: string): DriverDefinition | undefined {
  return shippedDrivers.find((driver) => driver.slug === slug);
}
