import { cleanFigure } from "@/lib/profile/clean-figure";
import type { DeviceLimits, NumberLimit } from "@/lib/profile/limits";
import type { DriverDefinition, DriverSetting } from "@/lib/serial/driver/definition";
import { toNeutral } from "@/lib/serial/driver/neutral";

function numberLimit({ value }: DriverSetting): NumberLimit | null {
  if (value.type !== "integer") return null;
  const at = (native: number) => Number(toNeutral(value, native));
  const step = cleanFigure(value.step * value.scale);
  return { min: at(value.min), max: at(value.max), step, unit: value.scale === 1 ? value.unit : neutralUnit(value.unit, value.scale) };
}

/** A clock held in kHz is spoken of in Hz in a document; any other unit stays. */
function neutralUnit(unit: string | undefined, scale: number): string | undefined {
  if (unit === "kHz" && scale === 1000) return "Hz";
  if (unit === "MHz" && scale === 1_000_000) return "Hz";
  return unit;
}

/**
 * What the checks know of a device, derived from its driver. Units are those of the neutral paths.
 * @param firmware the version that runs, where it is known
 */
export function deviceLimits(definition: DriverDefinition, firmware?: string): DeviceLimits {
  const neutral = definition.settings.filter(({ key }) => !key.includes("native.") && key !== "slots[*].mode");
  const numbers: Record<string, NumberLimit> = {};
  const choices: Record<string, readonly string[]> = {};
  const texts: Record<string, { maxLength: number; characters: string }> = {};
  for (const setting of neutral) {
    const { key, value } = setting;
    const limit = numberLimit(setting);
    if (limit) numbers[key] = limit;
    if (value.type === "text") texts[key] = { maxLength: value.maxLength, characters: value.characters };
    if (value.type === "choice") choices[key] = value.choices.flatMap((choice) => (typeof choice.neutral === "string" ? [choice.neutral] : []));
  }
  const { output, slots, modes } = definition;
  return {
    name: `${definition.maker} ${definition.model}`,
    numbers, texts,
    choices: Object.fromEntries(Object.entries(choices).filter(([, words]) => words.length > 0)),
    firstSlot: slots.first, slotCapacity: slots.count, firstMode: modes.first, modeCapacity: modes.count,
    clockHz: numbers["modes[*].timing.pixelClockHz"] ?? { min: 0, max: 0, step: 1 },
    horizontalMultiple: output.horizontalMultiple, maxLineTotal: output.maxLineTotal, maxFieldLines: output.maxFieldLines,
    interlace: output.interlace,
    inputs: definition.inputs.map(({ name, label, accepts }) => ({ name, label, accepts })),
    outputKinds: output.kinds, syncOutputs: output.sync, outsideRaster: output.outsideRaster, outputClock: output.clock, lineFilter: output.lineFilter,
    idle: output.idle,
    firmware: { min: definition.firmware.min, max: definition.firmware.max, running: firmware },
  };
}
