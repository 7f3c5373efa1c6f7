import { ByteQueue } from "./byte-queue";

/**
 * The bounded pipe between the page's stream and the system's side of a port: `bufferSize` bytes, one for each stream.
 *
 * The writing end pushes what fits and is told of room; the reading end takes what is there and is told of bytes and of the
 * end. One stream, one pipe: a stream that was replaced keeps its own, dead one.
 */
export class BytePipe {
  readonly #capacity: number;
  readonly #bytes = new ByteQueue();
  #ended = false;
  #broken = false;
  /** The reading end: bytes came, or the end did. */
  onBytes: (() => void) | null = null;
  /** The writing end: there is room again, or the reading end went away. */
  onRoom: (() => void) | null = null;

  constructor(capacity: number) {
    this.#capacity = capacity;
  }

  get length(): number {
    return this.#bytes.length;
  }

  get room(): number {
    return this.#broken ? 0 : this.#capacity - this.#bytes.length;
  }

  /** The writing end is closed: what is in the pipe can still be read. */
  get ended(): boolean {
    return this.#ended;
  }

  /** The reading end is closed: what was in the pipe is gone. */
  get broken(): boolean {
    return this.#broken;
  }

  /** Puts as many bytes in as fit. @returns how many */
  push(bytes: Uint8Array): number {
    const part = this.#ended ? bytes.subarray(0, 0) : bytes.subarray(0, this.room);
    if (part.length === 0) return 0;
    this.#bytes.push(part);
    this.onBytes?.();
    return part.length;
  }

  take(most: number): Uint8Array<ArrayBuffer> {
    const taken = this.#bytes.take(most);
    if (taken.length > 0) this.onRoom?.();
    return taken;
  }

  takeByte(): number | undefined {
    const byte = this.#bytes.takeByte();
    if (byte !== undefined) this.onRoom?.();
    return byte;
  }

  /** Closes the writing end. */
  end(): void {
    if (this.#ended) return;
    this.#ended = true;
    this.onBytes?.();
  }

  /** Closes the reading end. */
  breakOff(): void {
    if (this.#broken) return;
    this.#broken = true;
    this.#bytes.clear();
    this.onRoom?.();
  }
}
