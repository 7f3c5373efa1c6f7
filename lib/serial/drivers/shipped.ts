import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { brackenrow4r } from "./brackenrow-4r";
import { lanternfieldLf8 } from "./lanternfield-lf8";
import { ternwick16 } from "./ternwick-16";

/** The drivers that come with the project, each for an invented device. */
export const shippedDrivers: readonly DriverDefinition[] = [lanternfieldLf8, brackenrow4r, ternwick16];

/** A shipped driver by its slug, where there is one. */
export function findShippedDriver(slug: string): DriverDefinition | undefined {
  return shippedDrivers.find((driver) => driver.slug === slug);
}

/** A shipped driver by a slug that is known to be one. Throws otherwise. */
export function shippedDriver(slug: string): DriverDefinition {
  const driver = findShippedDriver(slug);
  if (!driver) throw new Error(`No driver ${slug} is shipped`);
  return driver;
}
