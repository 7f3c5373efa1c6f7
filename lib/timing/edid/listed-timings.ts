import { catalogue, ctaCatalogue } from "@/lib/timing/catalogue/catalogue";
import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import { byteAt } from "@/lib/timing/edid/block";
import type { EdidTiming } from "@/lib/timing/edid/edid-types";
import { activeFrameLines, fieldRateHz } from "@/lib/timing/rates";

/**
 * DMT identifiers of the established timings, byte 23h bit 7 first. 0: a maker's own timing that no standard prints.
 *
 * Source: VESA E-EDID, established timings I and II.
 */
const establishedDmts = [0, 0, 0x04, 0, 0x05, 0x06, 0x08, 0x09, 0x0a, 0x0b, 0, 0x0f, 0x10, 0x11, 0x12, 0x24];

const ownTimings = new Map([
  [0, "720 × 400, 70 Hz"],
  [1, "720 × 400, 88 Hz"],
  [3, "640 × 480, 67 Hz"],
  [10, "832 × 624, 75 Hz"],
]);

function listed(from: EdidTiming["from"], entry: CatalogueEntry): EdidTiming {
  return { from, name: entry.name, timing: entry.timing };
}

/** Established timings of bytes 23h and 24h, and the names of those that no standard prints. */
export function establishedTimings(block: Uint8Array): { timings: EdidTiming[]; unknown: string[] } {
  const bits = (byteAt(block, 0x23) << 8) | byteAt(block, 0x24);
  const set = establishedDmts
    .map((dmt, index) => ({ dmt, index }))
    .filter(({ index }) => (bits & (0x8000 >> index)) !== 0);
  const timings = set.flatMap(({ dmt }) => {
    const entry = catalogue.find(({ document, code }) => document === "VESA DMT" && code === dmt);
    return entry === undefined ? [] : [listed("established", entry)];
  });
  return { timings, unknown: set.flatMap(({ index }) => ownTimings.get(index) ?? []) };
}

/** Shape of a picture by the two upper bits of a standard timing. 1:1 before version 1.3. */
function aspectOf(bits: number, minor: number): number {
  return [minor < 3 ? 1 : 16 / 10, 4 / 3, 5 / 4, 16 / 9][bits] ?? 1;
}

/** Standard timings of bytes 26h to 35h: those that VESA DMT prints, and the rest in words. */
export function standardTimings(block: Uint8Array, minor: number): { timings: EdidTiming[]; unknown: string[] } {
  const timings: EdidTiming[] = [];
  const unknown: string[] = [];
  for (let index = 0x26; index < 0x36; index += 2) {
    const [width, rest] = [byteAt(block, index), byteAt(block, index + 1)];
    if ((width === 1 && rest === 1) || width === 0) continue;
    const activePx = (width + 31) * 8;
    const lines = Math.round(activePx / aspectOf(rest >> 6, minor));
    const rate = (rest & 0x3f) + 60;
    const entry = catalogue.find(
      ({ document, timing }) =>
        document === "VESA DMT" &&
        timing.horizontal.active === activePx &&
        activeFrameLines(timing) === lines &&
        Math.round(fieldRateHz(timing)) === rate,
    );
    if (entry === undefined) unknown.push(`${activePx} × ${lines}, ${rate} Hz`);
    else timings.push(listed("standard", entry));
  }
  return { timings, unknown };
}

/** The timing of a short video descriptor. Values 129 to 192 are codes 1 to 64 marked as native. */
export function ctaTiming(descriptor: number): EdidTiming | undefined {
  const vic = descriptor >= 129 && descriptor <= 192 ? descriptor - 128 : descriptor;
  const entry = ctaCatalogue.find(({ code }) => code === vic);
  return entry === undefined ? undefined : listed("cta-code", entry);
}
