import "server-only";
import type { DeviceLimits } from "@/lib/profile/limits";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { findShippedDriver } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";

/** A device's limits as given, or those of the driver that a slug names. Error: "no-driver". */
export function limitsOf(device: DeviceLimits | string | undefined): Result<DeviceLimits | undefined, "no-driver"> {
  if (typeof device !== "string") return ok(device);
  const driver = findShippedDriver(device);
  return driver === undefined ? fail("no-driver") : ok(deviceLimits(driver));
}
