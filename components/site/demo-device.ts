import type { ProfileDocument } from "@/lib/profile/document";
import { documentFromNative } from "@/lib/serial/backup/document";
import { compileDriver } from "@/lib/serial/driver/compile";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import type { SourceFormat } from "@/lib/timing/raster";

/** The simulated device that the front page shows and the Bench opens. */
export const DEMO_SLUG = "lanternfield-lf8";

/** What arrives at it: a source line falls whole on an output line, three to one. */
export const DEMO_SOURCE: SourceFormat = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };

/** Everything a new one holds, as a document. */
export function demoDocument(): ProfileDocument {
  const compiled = compileDriver(shippedDriver(DEMO_SLUG));
  if (!compiled.ok) throw new Error("The shipped driver does not compile");
  return documentFromNative(
    compiled.value,
    Object.fromEntries(compiled.value.settings.map(({ key, initial }) => [key, initial])),
  );
}

/** How source lines fall on output lines, in short: "720 → 240, 3 : 1". */
export function lineRatioWords(sourceLines: number, outputLines: number): string {
  const ratio = sourceLines / outputLines;
  const turned = ratio >= 1 ? ratio : 1 / ratio;
  const text = Number.isInteger(turned) ? String(turned) : turned.toFixed(2).replace(/0$/u, "");
  const whole = Number.isInteger(turned) ? ", whole" : "";
  return `${sourceLines} → ${outputLines}, ${ratio >= 1 ? `${text} : 1` : `1 : ${text}`}${whole}`;
}
