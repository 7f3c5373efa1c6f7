import type { EnvelopeBand, ScreenEnvelope } from "@/lib/timing/envelope";
import { fieldLines, fieldRateHz, lineRateHz, lineTotal, linesPerField } from "@/lib/timing/rates";
import { inSpan } from "@/lib/timing/span";
import type { RasterTiming } from "@/lib/timing/raster";
import { isRasterAllowed } from "./check/allowed-raster";
import type { DeviceLimits, NumberLimit } from "./limits";

/** A number of a timing: the pixel clock, or a part of an axis. */
export type TimingField =
  | { readonly axis: "clock" }
  | { readonly axis: "horizontal" | "vertical"; readonly part: "active" | "frontPorch" | "sync" | "backPorch" };

const parts = ["active", "frontPorch", "sync", "backPorch"] as const;

/** The field of a path inside a timing (`["horizontal", "sync"]`); null where it is no number. */
export function timingField(fields: readonly string[]): TimingField | null {
  const [axis, name] = fields;
  if (axis === "pixelClockHz") return { axis: "clock" };
  const part = parts.find((one) => one === name);
  if ((axis !== "horizontal" && axis !== "vertical") || part === undefined) return null;
  return { axis, part };
}

/** The timing with one number replaced. */
export function withTimingField(timing: RasterTiming, field: TimingField, value: number): RasterTiming {
  if (field.axis === "clock") return { ...timing, pixelClockHz: value };
  return { ...timing, [field.axis]: { ...timing[field.axis], [field.part]: value } };
}

/** What a device can make of a timing beyond the range of each number. */
export function deviceMakes(timing: RasterTiming, device: DeviceLimits): boolean {
  if (device.maxLineTotal !== undefined && lineTotal(timing) > device.maxLineTotal) return false;
  if (device.maxFieldLines !== undefined && fieldLines(timing) > device.maxFieldLines) return false;
  return parts.every((part) => timing.horizontal[part] % device.horizontalMultiple === 0);
}

/** The steps of a horizontal part of a timing: those of the device that are multiples of what it counts in. */
export function timingLimit(limit: NumberLimit, field: TimingField, device: DeviceLimits): NumberLimit {
  const multiple = device.horizontalMultiple;
  if (field.axis !== "horizontal" || multiple === 1 || limit.step % multiple === 0) return limit;
  return { ...limit, min: Math.ceil(limit.min / multiple) * multiple, step: multiple };
}

/**
 * Values of one number at which a band's line and field rates can both hold, every other number as it is: the ends of
 * that stretch and its middle. Blanking minimums cut it at one end alone, so whatever is safe holds one of the ends.
 */
export function bandEnds(timing: RasterTiming, field: TimingField, band: EnvelopeBand): readonly number[] {
  const perField = linesPerField(timing);
  const total = lineTotal(timing);
  const [line, rate] = [band.lineRateHz, band.fieldRateHz];
  if (field.axis === "clock") {
    return spread(
      Math.max(line[0] * total, rate[0] * total * perField),
      Math.min(line[1] * total, rate[1] * total * perField),
    );
  }
  if (field.axis === "horizontal") {
    const clock = timing.pixelClockHz;
    const others = total - timing.horizontal[field.part];
    const least = Math.max(clock / line[1], clock / (perField * rate[1]));
    const most = Math.min(clock / line[0], clock / (perField * rate[0]));
    return spread(least - others, most - others);
  }
  const others = perField - timing.vertical[field.part];
  return spread(lineRateHz(timing) / rate[1] - others, lineRateHz(timing) / rate[0] - others);
}

function spread(low: number, high: number): readonly number[] {
  return [low, (low + high) / 2, high];
}

/** One test a band: of each, the values that pass are a single stretch, since every limit is then an end of it. */
export function bandTests(
  screen: ScreenEnvelope | undefined,
): readonly { readonly band: EnvelopeBand | null; readonly allows: (timing: RasterTiming) => boolean }[] {
  if (!screen || screen.bands.length === 0)
    return [{ band: null, allows: (timing) => isRasterAllowed(timing, screen) }];
  return screen.bands.map((band) => {
    const alone = { ...screen, bands: [band] };
    // Rates first: they are two divisions, and most probes fail by them.
    const holdsRates = (timing: RasterTiming) =>
      inSpan(lineRateHz(timing), band.lineRateHz) && inSpan(fieldRateHz(timing), band.fieldRateHz);
    return { band, allows: (timing: RasterTiming) => holdsRates(timing) && isRasterAllowed(timing, alone) };
  });
}
