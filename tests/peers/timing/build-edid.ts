import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

/** Blocks that add up to 0: the last byte of each is its checksum. */
function summed(block: number[]): number[] {
  const padded = [...block, ...Array<number>(127 - block.length).fill(0)];
  const sum = padded.reduce((total, byte) => total + byte, 0);
  return [...padded, (256 - (sum % 256)) % 256];
}

const blank = (axis: AxisTiming) => axis.frontPorch + axis.sync + axis.backPorch;
const positive = (axis: AxisTiming) => axis.polarity === "positive";

/** The 18 bytes of a detailed timing. Source: VESA E-EDID, detailed timing definition. */
export function detailedDescriptor({ pixelClockHz, interlaced, horizontal: h, vertical: v }: RasterTiming): number[] {
  const clock = Math.round(pixelClockHz / 10_000);
  const flags = 0x18 | (interlaced ? 0x80 : 0) | (positive(v) ? 0x04 : 0) | (positive(h) ? 0x02 : 0);
  return [
    clock & 0xff,
    clock >> 8,
    h.active & 0xff,
    blank(h) & 0xff,
    ((h.active >> 8) << 4) | (blank(h) >> 8),
    v.active & 0xff,
    blank(v) & 0xff,
    ((v.active >> 8) << 4) | (blank(v) >> 8),
    h.frontPorch & 0xff,
    h.sync & 0xff,
    ((v.frontPorch & 0xf) << 4) | (v.sync & 0xf),
    ((h.frontPorch >> 8) << 6) | ((h.sync >> 8) << 4) | ((v.frontPorch >> 4) << 2) | (v.sync >> 4),
    ...[0, 0, 0, 0, 0],
    flags,
  ];
}

/** A picture wider than 4 095 px has no place in a detailed timing of the base block. */
export const fitsDescriptor = (timing: RasterTiming) =>
  timing.horizontal.active <= 4095 && timing.pixelClockHz <= 655.35e6;

/** The 20 bytes of a type I timing. Source: VESA DisplayID 1.3, video timing modes type I. */
function displayIdTiming({ pixelClockHz, horizontal: h, vertical: v }: RasterTiming): number[] {
  const clock = Math.round(pixelClockHz / 10_000) - 1;
  const word = (value: number, bit15 = false) => [(value - 1) & 0xff, ((value - 1) >> 8) | (bit15 ? 0x80 : 0)];
  const axis = (part: AxisTiming) => [
    ...word(part.active),
    ...word(blank(part)),
    ...word(part.frontPorch, positive(part)),
    ...word(part.sync),
  ];
  return [clock & 0xff, (clock >> 8) & 0xff, clock >> 16, 0x08, ...axis(h), ...axis(v)];
}

function displayIdBlock(timings: readonly RasterTiming[]): number[] {
  const data = timings.flatMap(displayIdTiming);
  const section = [0x13, data.length + 3, 0x00, 0x00, 0x03, 0x00, data.length, ...data];
  const sum = section.reduce((total, byte) => total + byte, 0);
  return summed([0x70, ...section, (256 - (sum % 256)) % 256]);
}

/** A base block and as many extensions as the timings take, each timing once, those too wide for a descriptor last. */
export function buildEdid(timings: readonly RasterTiming[]): { bytes: Uint8Array; order: RasterTiming[] } {
  const narrow = timings.filter(fitsDescriptor);
  const large = timings.filter((timing) => !fitsDescriptor(timing));
  const blocks: number[][] = [];
  for (let index = 0; index < narrow.length; index += 6) {
    blocks.push(summed([0x02, 3, 4, 0, ...narrow.slice(index, index + 6).flatMap(detailedDescriptor)]));
  }
  for (let index = 0; index < large.length; index += 5) blocks.push(displayIdBlock(large.slice(index, index + 5)));
  const dummy = [0, 0, 0, 0x10, ...Array<number>(14).fill(0)];
  const identity = [0x0a, 0xb0, 1, 0, 1, 0, 0, 0, 1, 30, 1, 4, 0xa5, 40, 30, 0x78, 0x02];
  const base = [
    0,
    255,
    255,
    255,
    255,
    255,
    255,
    0,
    ...identity,
    ...Array<number>(13).fill(0),
    ...Array<number>(16).fill(1),
  ];
  const whole = [summed([...base, ...dummy, ...dummy, ...dummy, ...dummy, blocks.length]), ...blocks];
  return { bytes: Uint8Array.from(whole.flat()), order: [...narrow, ...large] };
}
