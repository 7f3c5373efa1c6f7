import { byteAt } from "@/lib/timing/edid/block";
import { detailedTiming } from "@/lib/timing/edid/detailed-timing";
import type { EdidTiming } from "@/lib/timing/edid/edid-types";
import { ctaTiming } from "@/lib/timing/edid/listed-timings";
import { modeName } from "@/lib/timing/mode-name";

const DESCRIPTOR_BYTES = 18;
const VIDEO_TAG = 2;
const EXTENDED_TAG = 7;
/** Extended tag of the formats that are taken as 4:2:0 alone: codes like those of a video data block. */
const VIDEO_420_TAG = 14;

function videoCodes(block: Uint8Array, end: number): number[] {
  const codes: number[] = [];
  // Each data block is 1 to 32 bytes, so there are at most 123 of them.
  for (let index = 4; index < end;) {
    const header = byteAt(block, index);
    const [tag, length] = [header >> 5, header & 0x1f];
    const first = index + 1;
    const next = Math.min(first + length, end);
    if (tag === VIDEO_TAG) codes.push(...block.subarray(first, next));
    if (tag === EXTENDED_TAG && length > 0 && byteAt(block, first) === VIDEO_420_TAG)
      codes.push(...block.subarray(first + 1, next));
    index = first + length;
  }
  return codes;
}

/** Detailed timings and video codes of a CTA-861 extension block (tag 02h), whose checksum holds. */
export function ctaExtension(block: Uint8Array): { timings: EdidTiming[]; warnings: string[] } {
  const warnings: string[] = [];
  const offset = byteAt(block, 2);
  if (offset !== 0 && (offset < 4 || offset > 127)) {
    return { timings: [], warnings: ["A CTA-861 extension points outside itself and is not read."] };
  }
  const codes = byteAt(block, 1) >= 3 ? videoCodes(block, offset) : [];
  const listed = codes.flatMap((code) => ctaTiming(code) ?? []);
  const detailed: EdidTiming[] = [];
  for (let index = offset; offset !== 0 && index + DESCRIPTOR_BYTES <= 127; index += DESCRIPTOR_BYTES) {
    const bytes = block.subarray(index, index + DESCRIPTOR_BYTES);
    if (byteAt(bytes, 0) === 0 && byteAt(bytes, 1) === 0) break;
    const timing = detailedTiming(bytes);
    if (timing === undefined) warnings.push("A detailed timing of an extension does not add up and is left out.");
    else detailed.push({ from: "detailed", name: modeName(timing), timing });
  }
  return { timings: [...detailed, ...listed], warnings };
}
