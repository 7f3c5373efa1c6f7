/** Bytes of one block of an EDID. */
export const BLOCK_BYTES = 128;

/** Blocks of an EDID at most: the base block and 255 extensions. */
export const MAX_BLOCKS = 256;

/** A byte of a block; 0 beyond its end, which no caller reaches. */
export function byteAt(bytes: Uint8Array, index: number): number {
  return bytes[index] ?? 0;
}

/** A block is whole where its 128 bytes add up to 0, modulo 256. */
export function checksumHolds(block: Uint8Array): boolean {
  return block.reduce((sum, byte) => (sum + byte) & 0xff, 0) === 0;
}

/** Text of a descriptor: 13 bytes ended by a line feed. What is not printable ASCII is left out. */
export function descriptorText(descriptor: Uint8Array): string {
  const bytes = [...descriptor.subarray(5, 18)];
  const end = bytes.indexOf(0x0a);
  return bytes
    .slice(0, end < 0 ? bytes.length : end)
    .filter((byte) => byte >= 0x20 && byte < 0x7f)
    .map((byte) => String.fromCharCode(byte))
    .join("")
    .trim();
}
