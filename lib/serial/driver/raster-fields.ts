import type { RasterTiming } from "@/lib/timing/raster";
import type { NativeValue } from "@/lib/serial/native";
import type { CompiledDriver, Fields } from "./compiled";
import { toNative, toNeutral, type NeutralValue } from "./neutral";

/** Fields of a `rasterOut` reply, and the mode setting in whose native values each is written. */
const RASTER_FIELDS = {
  clock: "pixelClockHz", scan: "interlaced",
  hActive: "horizontal.active", hFrontPorch: "horizontal.frontPorch", hSync: "horizontal.sync", hBackPorch: "horizontal.backPorch", hPolarity: "horizontal.polarity",
  vActive: "vertical.active", vFrontPorch: "vertical.frontPorch", vSync: "vertical.sync", vBackPorch: "vertical.backPorch", vPolarity: "vertical.polarity",
} as const;

type RasterField = keyof typeof RASTER_FIELDS;

const settingOf = (driver: CompiledDriver, field: RasterField) => driver.byKey.get(`modes[${driver.definition.modes.first}].timing.${RASTER_FIELDS[field]}`)?.value;

function neutralOf({ horizontal, vertical, ...timing }: RasterTiming): Readonly<Record<RasterField, NeutralValue>> {
  return {
    clock: timing.pixelClockHz, scan: timing.interlaced,
    hActive: horizontal.active, hFrontPorch: horizontal.frontPorch, hSync: horizontal.sync, hBackPorch: horizontal.backPorch, hPolarity: horizontal.polarity,
    vActive: vertical.active, vFrontPorch: vertical.frontPorch, vSync: vertical.sync, vBackPorch: vertical.backPorch, vPolarity: vertical.polarity,
  };
}

/** Nothing out: every number is 0, every word the first that the driver has. */
function emptyField(driver: CompiledDriver, field: RasterField): NativeValue {
  const value = settingOf(driver, field);
  return value?.type === "choice" ? (value.choices[0]?.native ?? 0) : 0;
}

/** The fields that a device answers with for the raster it puts out; null: nothing is out. */
export function rasterToFields(driver: CompiledDriver, raster: RasterTiming | null): Fields {
  const names = Object.keys(RASTER_FIELDS) as RasterField[];
  if (raster === null) return Object.fromEntries(names.map((field) => [field, emptyField(driver, field)]));
  const neutral = neutralOf(raster);
  return Object.fromEntries(
    names.map((field) => {
      const value = settingOf(driver, field);
      return [field, (value && toNative(value, neutral[field])) ?? 0];
    }),
  );
}

/** The raster that a reply speaks of; null: nothing is out (a clock of 0); undefined: the reply makes none. */
export function rasterFromFields(driver: CompiledDriver, fields: Fields): RasterTiming | null | undefined {
  if (fields["clock"] === 0) return null;
  const neutral = (field: RasterField) => {
    const value = settingOf(driver, field);
    const native = fields[field];
    return value && native !== undefined ? toNeutral(value, native) : undefined;
  };
  const number = (field: RasterField) => Number(neutral(field) ?? Number.NaN);
  const polarity = (field: RasterField) => (neutral(field) === "positive" ? ("positive" as const) : ("negative" as const));
  const raster: RasterTiming = {
    pixelClockHz: number("clock"), interlaced: neutral("scan") === true,
    horizontal: { active: number("hActive"), frontPorch: number("hFrontPorch"), sync: number("hSync"), backPorch: number("hBackPorch"), polarity: polarity("hPolarity") },
    vertical: { active: number("vActive"), frontPorch: number("vFrontPorch"), sync: number("vSync"), backPorch: number("vBackPorch"), polarity: polarity("vPolarity") },
  };
  const { polarity: _h, ...across } = raster.horizontal;
  const { polarity: _v, ...down } = raster.vertical;
  return [raster.pixelClockHz, ...Object.values(across), ...Object.values(down)].every(Number.isFinite) ? raster : undefined;
}
