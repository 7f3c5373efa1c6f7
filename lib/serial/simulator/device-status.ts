import type { RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver, Fields } from "@/lib/serial/driver/compiled";
import type { StatusName } from "@/lib/serial/driver/definition";
import { rasterToFields } from "@/lib/serial/driver/raster-fields";
import type { DeviceIdentity } from "@/lib/serial/session/types";
import type { DeviceMemory } from "./device-memory";

function arrivingFields(driver: CompiledDriver, memory: DeviceMemory): Fields {
  const { source } = memory;
  const input = memory.working.get(`slots[${memory.activeSlot}].input`) ?? 0;
  if (!source) return { input, activePx: 0, activeLines: 0, interlaced: 0, fieldRateMilliHz: 0, locked: 0 };
  return {
    input, activePx: source.activePx, activeLines: source.activeLines, interlaced: source.interlaced ? 1 : 0,
    fieldRateMilliHz: Math.round(source.fieldRateHz * 1000), locked: inputLocks(driver, memory) ? 1 : 0,
  };
}

const within = (span: readonly [number, number] | undefined, value: number) => !span || (value >= span[0] && value <= span[1]);

/** The active slot's input locks to what arrives: the first accepted format that fits decides; unknown ones lock here. */
export function inputLocks(driver: CompiledDriver, memory: DeviceMemory): boolean {
  const { source } = memory;
  if (!source) return false;
  const native = memory.working.get(`slots[${memory.activeSlot}].input`);
  const setting = driver.byKey.get(`slots[${memory.activeSlot}].input`)?.value;
  const neutral = setting?.type === "choice" ? setting.choices.find((choice) => choice.native === native)?.neutral : undefined;
  const input = driver.definition.inputs.find(({ name }) => name === neutral) ?? driver.definition.inputs[0];
  const format = input?.accepts.find(
    ({ activeLines, interlaced, fieldRateHz }) =>
      within(activeLines, source.activeLines) && (interlaced === undefined || interlaced === source.interlaced) && within(fieldRateHz, source.fieldRateHz),
  );
  return format !== undefined && format.locks !== "does-not-lock";
}

/** The fields of a status reply, as `operationWireSchema` names them. The error queue belongs to the protocol's own side. */
export function statusFields(
  driver: CompiledDriver, memory: DeviceMemory, name: StatusName, identity: DeviceIdentity, out: RasterTiming | null, committed: boolean,
): Fields {
  const { maker, model, serialNumber, firmware } = identity;
  switch (name) {
    case "identity":
      return { maker, model, serial: serialNumber ?? "", firmware };
    case "activeSlot":
      return { slot: memory.activeSlot };
    case "bootCount":
      return { count: memory.bootCount };
    case "committed":
      return { committed: committed ? 1 : 0 };
    case "rasterOut":
      return rasterToFields(driver, out);
    case "arriving":
      return arrivingFields(driver, memory);
    case "operationComplete":
      return { complete: 1 };
    case "errorQueue":
      return { code: 0, message: "No error" };
  }
}
