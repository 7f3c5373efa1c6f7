import { isServerAway } from "@/components/ui/api";
import type { BenchCore } from "@/components/bench/store/bench-core";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";
import { findShippedDriver } from "@/lib/serial/drivers/shipped";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";

/** A driver by its slug and version. */
export type DriverRef = { readonly slug: string; readonly version: string };

function compiledOf(definition: unknown, { slug, version }: DriverRef): CompiledDriver {
  const parsed = parseDefinition(definition);
  if (!parsed.ok) throw new Error(`Driver ${slug} ${version} does not compile: ${parsed.error[0]?.message ?? ""}`);
  return parsed.value.driver;
}

/** One version of a driver: that which came with the program, or as the server has it. Throws `ApiProblem`. */
export async function driverOf(core: BenchCore, ref: DriverRef): Promise<CompiledDriver> {
  const shipped = findShippedDriver(ref.slug);
  if (shipped?.version === ref.version) return compiledDriver(shipped);
  return compiledOf(await core.around.server.driverDefinition(ref), ref);
}

/**
 * The driver that a device is met with: the newest that is published, or what came with the program where nobody is signed in or
 * the server is away. Which version a known device has is found out after it said who it is.
 */
export async function firstDriver(core: BenchCore, slug: string): Promise<CompiledDriver> {
  const shipped = findShippedDriver(slug);
  if (shipped && !core.around.account) return compiledDriver(shipped);
  try {
    const newest = await core.around.server.newestDriver(slug);
    if (newest !== null) return await driverOf(core, { slug, version: newest });
  } catch (error) {
    if (!shipped || !isServerAway(error)) throw error;
  }
  if (!shipped) throw new Error(`No version of the driver ${slug} is published.`);
  return compiledDriver(shipped);
}
