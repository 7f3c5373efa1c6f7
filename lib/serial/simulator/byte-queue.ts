/** Bytes in order, in chunks as they came. Its owner states the bound. */
export class ByteQueue {
  #chunks: Uint8Array[] = [];
  #length = 0;
  /** Bytes of the first chunk that are gone. */
  #gone = 0;

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
      const part = head.subarray(this.#gone, this.#gone + taken.length - filled);
      taken.set(part, filled);
      filled += part.length;
      this.#pass(head, part.length);
    }
    return taken;
  }

  /** Takes one byte from the front; undefined where there is none. */
  takeByte(): number | undefined {
    const head = this.#chunks[0];
    if (!head) return undefined;
    const byte = head[this.#gone];
    this.#pass(head, 1);
    return byte;
  }

  #pass(head: Uint8Array, count: number): void {
    this.#length -= count;
    this.#gone += count;
    if (this.#gone < head.length) return;
    this.#chunks.shift();
    this.#gone = 0;
  }

  clear(): void {
    this.#chunks = [];
    this.#length = 0;
    this.#gone = 0;
  }
}
