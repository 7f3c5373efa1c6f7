import { fail, ok, type Result } from "@/lib/result";
import { BLOCK_BYTES, byteAt, checksumHolds, descriptorText, MAX_BLOCKS } from "@/lib/timing/edid/block";
import { ctaExtension } from "@/lib/timing/edid/cta-extension";
import { detailedTiming } from "@/lib/timing/edid/detailed-timing";
import type { EdidError, EdidProduct, EdidRanges, EdidReading, EdidTiming } from "@/lib/timing/edid/edid-types";
import { establishedTimings, standardTimings } from "@/lib/timing/edid/listed-timings";
import { rangeLimits } from "@/lib/timing/edid/range-limits";
import { modeName } from "@/lib/timing/mode-name";

const HEADER = [0x00, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0x00];
const CTA_TAG = 0x02;
const BLOCK_MAP_TAG = 0xf0;

/** Offsets of the four 18-byte descriptors of the base block. */
const DESCRIPTORS = [54, 72, 90, 108];

const wrong = (code: EdidError["code"], message: string) => fail<EdidError>({ code, message });

type Descriptors = {
  readonly timings: EdidTiming[];
  readonly warnings: string[];
  ranges?: EdidRanges;
  name?: string;
  serial?: string;
};

function readDescriptor(bytes: Uint8Array, minor: number, into: Descriptors): void {
  if (byteAt(bytes, 0) !== 0 || byteAt(bytes, 1) !== 0) {
    const timing = detailedTiming(bytes);
    if (timing === undefined) into.warnings.push("A detailed timing does not add up and is left out.");
    else into.timings.push({ from: "detailed", name: modeName(timing), timing });
    return;
  }
  const tag = byteAt(bytes, 3);
  if (tag === 0xfc) into.name = descriptorText(bytes);
  if (tag === 0xff) into.serial = descriptorText(bytes);
  if (tag !== 0xfd) return;
  const ranges = rangeLimits(bytes, minor);
  if (typeof ranges === "string") into.warnings.push(ranges);
  else into.ranges = ranges;
}

/** Three letters of five bits each; "?" for what is no letter. */
function makerOf(block: Uint8Array): string {
  const word = (byteAt(block, 8) << 8) | byteAt(block, 9);
  return [10, 5, 0]
    .map((shift) => (word >> shift) & 0x1f)
    .map((letter) => (letter >= 1 && letter <= 26 ? String.fromCharCode(64 + letter) : "?"))
    .join("");
}

function productOf(block: Uint8Array, { name, serial }: Descriptors): EdidProduct {
  const year = byteAt(block, 17);
  return {
    maker: makerOf(block),
    code: byteAt(block, 10) | (byteAt(block, 11) << 8),
    ...(name === undefined || name === "" ? {} : { name }),
    ...(serial === undefined || serial === "" ? {} : { serial }),
    ...(year === 0 ? {} : { year: 1990 + year }),
  };
}

function extensionsOf(bytes: Uint8Array): { timings: EdidTiming[]; warnings: string[] } {
  const stated = byteAt(bytes, 126);
  const present = Math.floor(bytes.length / BLOCK_BYTES) - 1;
  const timings: EdidTiming[] = [];
  const warnings: string[] = [];
  if (stated !== present) warnings.push(`It says that ${stated} extension blocks follow, and ${present} do.`);
  if (bytes.length % BLOCK_BYTES !== 0) warnings.push("The last block is cut short and is not read.");
  for (let index = 1; index <= Math.min(stated, present); index += 1) {
    const block = bytes.subarray(index * BLOCK_BYTES, (index + 1) * BLOCK_BYTES);
    const tag = byteAt(block, 0);
    if (tag === BLOCK_MAP_TAG) continue;
    if (!checksumHolds(block)) warnings.push(`The checksum of extension ${index} is wrong: it is not read.`);
    else if (tag === CTA_TAG) {
      const cta = ctaExtension(block);
      timings.push(...cta.timings);
      warnings.push(...cta.warnings);
    }
  }
  return { timings, warnings };
}

function syncsOf(input: number): EdidReading["syncs"] {
  if ((input & 0x80) !== 0) return undefined;
  return { separate: (input & 0x08) !== 0, composite: (input & 0x04) !== 0, onGreen: (input & 0x02) !== 0 };
}

/**
 * Reads an E-EDID: the base block and its CTA-861 extensions, at most 256 blocks; other extensions are passed over.
 *
 * Source: VESA E-EDID (structure 1.3 and 1.4), CTA-861 (extension).
 * Errors: too short or long, no header, or a base block whose checksum is wrong; all else is a warning.
 */
export function parseEdid(bytes: Uint8Array): Result<EdidReading, EdidError> {
  if (bytes.length < BLOCK_BYTES)
    return wrong("too-short", `An EDID has 128 bytes at least; this has ${bytes.length}.`);
  if (bytes.length > MAX_BLOCKS * BLOCK_BYTES) return wrong("too-long", "An EDID has 256 blocks of 128 bytes at most.");
  if (HEADER.some((byte, index) => byteAt(bytes, index) !== byte))
    return wrong("header", "It does not begin as an EDID does.");
  const base = bytes.subarray(0, BLOCK_BYTES);
  if (!checksumHolds(base))
    return wrong("checksum", "The checksum of its first block is wrong: read it from the screen again.");
  const minor = byteAt(base, 19);
  const found: Descriptors = { timings: [], warnings: [] };
  for (const offset of DESCRIPTORS) readDescriptor(base.subarray(offset, offset + 18), minor, found);
  const established = establishedTimings(base);
  const standard = standardTimings(base, minor);
  const extensions = extensionsOf(bytes);
  const unprinted = [...established.unknown, ...standard.unknown];
  const [input, width, height] = [byteAt(base, 20), byteAt(base, 21), byteAt(base, 22)];
  const syncs = syncsOf(input);
  return ok({
    version: `${byteAt(base, 18)}.${minor}`,
    product: productOf(base, found),
    input: (input & 0x80) !== 0 ? "digital" : "analog",
    ...(syncs === undefined ? {} : { syncs }),
    ...(width > 0 && height > 0 ? { sizeCm: { width, height } } : {}),
    ...(found.ranges === undefined ? {} : { ranges: found.ranges }),
    timings: [...found.timings, ...established.timings, ...standard.timings, ...extensions.timings],
    warnings: [
      ...found.warnings,
      ...(unprinted.length > 0 ? [`No standard prints these of its timings: ${unprinted.join("; ")}.`] : []),
      ...extensions.warnings,
    ],
  });
}
