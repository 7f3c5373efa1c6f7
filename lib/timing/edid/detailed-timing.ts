import { byteAt } from "@/lib/timing/edid/block";
import type { AxisTiming, Polarity, RasterTiming } from "@/lib/timing/raster";
import { rasterProblems } from "@/lib/timing/raster-problems";

function axis(
  counts: { active: number; blank: number; front: number; sync: number; border: number },
  polarity: Polarity,
): AxisTiming | undefined {
  const { active, blank, front, sync, border } = counts;
  const frontPorch = front + border;
  const backPorch = blank - frontPorch - sync;
  return backPorch < 0 ? undefined : { active, frontPorch, sync, backPorch, polarity };
}

/** Bits 4 and 3 set say "digital, separate syncs": only then are both polarities stated. */
function polarities(flags: number): { horizontal: Polarity; vertical: Polarity } {
  const separate = (flags & 0x18) === 0x18;
  const sign = (bit: number): Polarity => ((flags & bit) !== 0 ? "positive" : "negative");
  return { horizontal: sign(0x02), vertical: separate ? sign(0x04) : "negative" };
}

/**
 * The raster of an 18-byte detailed timing descriptor; borders are part of the porches.
 *
 * Source: VESA E-EDID, table of the detailed timing definition. Vertical figures are lines of a field.
 * @returns undefined where the bytes are no timing (their parts do not add up, or there is no clock)
 */
export function detailedTiming(bytes: Uint8Array): RasterTiming | undefined {
  const at = (index: number) => byteAt(bytes, index);
  const high = (index: number, shift: number, bits: number) => (at(index) >> shift) & ((1 << bits) - 1);
  const flags = at(17);
  const { horizontal: hPolarity, vertical: vPolarity } = polarities(flags);
  const horizontal = axis(
    {
      active: at(2) | (high(4, 4, 4) << 8),
      blank: at(3) | (high(4, 0, 4) << 8),
      front: at(8) | (high(11, 6, 2) << 8),
      sync: at(9) | (high(11, 4, 2) << 8),
      border: at(15),
    },
    hPolarity,
  );
  const vertical = axis(
    {
      active: at(5) | (high(7, 4, 4) << 8),
      blank: at(6) | (high(7, 0, 4) << 8),
      front: high(10, 4, 4) | (high(11, 2, 2) << 4),
      sync: high(10, 0, 4) | (high(11, 0, 2) << 4),
      border: at(16),
    },
    vPolarity,
  );
  if (horizontal === undefined || vertical === undefined) return undefined;
  const pixelClockHz = (at(0) | (at(1) << 8)) * 10_000;
  const timing = { pixelClockHz, interlaced: (flags & 0x80) !== 0, horizontal, vertical };
  return rasterProblems(timing).length === 0 ? timing : undefined;
}
