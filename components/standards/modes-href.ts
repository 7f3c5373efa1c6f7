import { DEFAULT_CHOICES } from "@/components/modes/store/choices";
import { toQuery } from "@/components/modes/store/link";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz } from "@/lib/timing/rates";

/** Where Modes shows a raster as it is, held against the same screen. */
export function modesHref(
  timing: RasterTiming,
  screen: { readonly value: string; readonly envelope: ScreenEnvelope | null },
): string {
  const wish = {
    activeLines: activeFrameLines(timing),
    activePx: timing.horizontal.active,
    // A thousandth of a Hz tells any two published rates apart.
    fieldRateHz: Number(fieldRateHz(timing).toFixed(3)),
    interlaced: timing.interlaced,
  };
  return `/modes?${toQuery({
    ...DEFAULT_CHOICES,
    wish,
    raster: timing,
    byHand: true,
    ...(screen.envelope === null ? {} : { screen: { id: screen.value, envelope: screen.envelope } }),
  })}`;
}
