import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { muteCost, recallCost, wholeReadCost, writeCost, type WireCost } from "@/lib/serial/driver/costs";
import type { PlanStep } from "./types";

const NOTHING: WireCost = { bytes: 0, seconds: 0 };

function stepCost(driver: CompiledDriver, step: PlanStep): WireCost {
  switch (step.kind) {
    case "write":
      return writeCost(driver, step.writes);
    case "recall":
      return recallCost(driver, step.slot, step.rasterAfter);
    case "mute":
      return muteCost(driver, step.on);
  }
}

const wholeReads = new WeakMap<CompiledDriver, number>();

/** Seconds of a whole read, for a device with a new one's values: texts make it longer by less than a second. */
export function wholeReadSeconds(driver: CompiledDriver): number {
  const known = wholeReads.get(driver) ?? wholeReadCost(driver).seconds;
  wholeReads.set(driver, known);
  return known;
}

/** Bytes both ways and seconds of a plan's requests and their read-backs. */
export function stepsCost(driver: CompiledDriver, steps: readonly PlanStep[]): WireCost {
  return steps.map((step) => stepCost(driver, step)).reduce(
    (sum, cost) => ({ bytes: sum.bytes + cost.bytes, seconds: sum.seconds + cost.seconds }),
    NOTHING,
  );
}
