import { byteAt } from "@/lib/timing/edid/block";
import type { EdidRanges } from "@/lib/timing/edid/edid-types";

/** Added to a rate that one byte cannot hold. */
const OFFSET = 255;

/**
 * The display range limits descriptor (tag FDh).
 *
 * From version 1.4 byte 4 says which of the four rates have 255 added: bits 1 and 0 the vertical ones, 3 and 2 the
 * horizontal ones; 10b the upper end, 11b both. Byte 9 is the pixel clock in 10 MHz (0 or FFh: not stated); with a CVT
 * descriptor (byte 10 = 4) bits 7 to 2 of byte 12 say how many quarters of a MHz that is rounded up by.
 * Source: VESA E-EDID 1.4, display range limits.
 * @returns Hz, or what is wrong with it
 */
export function rangeLimits(descriptor: Uint8Array, minor: number): EdidRanges | string {
  const at = (index: number) => byteAt(descriptor, index);
  const flags = minor >= 4 ? at(4) : 0;
  const offset = (high: number, both: number): [number, number] =>
    (flags & high) === 0 ? [0, 0] : [(flags & both) !== 0 ? OFFSET : 0, OFFSET];
  const [slowField, fastField] = offset(0x02, 0x01);
  const [slowLine, fastLine] = offset(0x08, 0x04);
  const fieldRateHz = [at(5) + slowField, at(6) + fastField] as const;
  const lineRateHz = [(at(7) + slowLine) * 1000, (at(8) + fastLine) * 1000] as const;
  const ends = [...fieldRateHz, ...lineRateHz];
  if (ends.some((end) => end === 0)) return "The range limits leave a rate out.";
  if (fieldRateHz[0] > fieldRateHz[1] || lineRateHz[0] > lineRateHz[1]) return "The range limits are crossed.";
  const clock = at(9);
  if (clock === 0 || clock === 0xff) return { fieldRateHz, lineRateHz };
  const maxPixelClockHz = clock * 1e7;
  const quarters = at(10) === 4 ? at(12) >> 2 : 0;
  if (quarters === 0) return { fieldRateHz, lineRateHz, maxPixelClockHz };
  return { fieldRateHz, lineRateHz, maxPixelClockHz, exactPixelClockHz: maxPixelClockHz - quarters * 250_000 };
}
