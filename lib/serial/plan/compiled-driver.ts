import { compileDriver } from "@/lib/serial/driver/compile";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";

/** By the definition's own object: a page plans again at every change of a ruler. */
const compiled = new WeakMap<DriverDefinition, CompiledDriver>();

/** The compiled form of a definition that was found sound when it was stored; throws on one that is not. */
export function compiledDriver(definition: DriverDefinition): CompiledDriver {
  const known = compiled.get(definition);
  if (known) return known;
  const result = compileDriver(definition);
  if (!result.ok) {
    const [first] = result.error;
    throw new Error(`Driver ${definition.slug} does not compile: ${first?.path ?? ""} ${first?.message ?? ""}`);
  }
  compiled.set(definition, result.value);
  return result.value;
}
