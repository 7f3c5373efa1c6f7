/** Bytes in order, in chunks as they came. Its owner states the bound. */
export class ByteQueue {
  #chunks: Uint8Array[] = [];
  #length = 0;

  get length(): number {
    return this.#length;
  }

  /** Copies `bytes` in, so that the caller may use its buffer again. */
  push(bytes: Uint8Array): void {
    if (bytes.byteLength === 0) return;
    this.#chunks.push(bytes.slice());
    this.#length += bytes.byteLength;
  }

  /** Takes at most `most` bytes from the front. */
  take(most: number): Uint8Array<ArrayBuffer> {
    const taken = new Uint8Array(Math.max(0, Math.min(most, this.#length)));
    let filled = 0;
    while (filled < taken.length) {
      const head = this.#chunks[0];
      if (!head) break;
      const part = head.subarray(0, taken.length - filled);
      taken.set(part, filled);
      filled += part.length;
      if (part.length === head.length) this.#chunks.shift();
      else this.#chunks[0] = head.subarray(part.length);
    }
    this.#length -= taken.length;
    return taken;
  }

  clear(): void {
    this.#chunks = [];
    this.#length = 0;
  }
}
