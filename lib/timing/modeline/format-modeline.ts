import { modeName } from "@/lib/timing/mode-name";
import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

/** MHz with as many decimals as the Hz need, two at least. */
function clockText(pixelClockHz: number): string {
  const short = (pixelClockHz / 1e6).toFixed(6).replace(/0+$/u, "");
  const decimals = short.length - short.indexOf(".") - 1;
  return decimals >= 2 ? short : short.padEnd(short.length + 2 - decimals, "0");
}

/** Active, start and end of the sync, total; `scale` 2 counts the lines of both fields, `spare` the odd one. */
function edges(axis: AxisTiming, scale: number, spare: number): string {
  const start = axis.active + axis.frontPorch;
  const end = start + axis.sync;
  return [axis.active * scale, start * scale, end * scale, (end + axis.backPorch) * scale + spare].join(" ");
}

/** A name that can stand between quotation marks on one line. */
function safeName(name: string): string {
  return name.replace(/["\p{Cc}]/gu, "").trim();
}

/**
 * Writes an X.Org modeline. An interlaced one counts frame lines, with the odd line in the back porch.
 *
 * @param name `modeName` where empty
 * @returns one line that `parseModeline` reads back to the same timing
 */
export function formatModeline(timing: RasterTiming, name = ""): string {
  const { horizontal, vertical, interlaced } = timing;
  const spare = interlaced && timing.equalFields !== true ? 1 : 0;
  const sign = (axis: AxisTiming) => (axis.polarity === "positive" ? "+" : "-");
  const label = safeName(name) === "" ? modeName(timing) : safeName(name);
  const parts = [
    `Modeline "${label}"`,
    clockText(timing.pixelClockHz),
    edges(horizontal, 1, 0),
    edges(vertical, interlaced ? 2 : 1, spare),
    `${sign(horizontal)}HSync ${sign(vertical)}VSync`,
    ...(interlaced ? ["Interlace"] : []),
  ];
  return parts.join(" ");
}
