/**
 * SHA-256, synchronous, for the browser and the server alike (WebCrypto's own is asynchronous).
 *
 * Source: FIPS 180-4, sections 4.1.2, 4.2.2, 5.1.1, 5.3.3 and 6.2.
 */

/** The first 32 bits of the fractional parts of the square or cube root of a prime. */
function fraction(root: number): number {
  return Math.floor((root - Math.floor(root)) * 2 ** 32);
}

function firstPrimes(count: number): number[] {
  const primes: number[] = [];
  for (let candidate = 2; primes.length < count; candidate += 1) {
    if (primes.every((prime) => candidate % prime !== 0)) primes.push(candidate);
  }
  return primes;
}

const primes = firstPrimes(64);
const initial = Uint32Array.from(primes.slice(0, 8), (prime) => fraction(Math.sqrt(prime)));
const constants = Uint32Array.from(primes, (prime) => fraction(Math.cbrt(prime)));

const rotate = (word: number, bits: number) => (word >>> bits) | (word << (32 - bits));
/** Indices below are within fixed arrays; a typed array's element is a number all the same. */
const at = (words: Uint32Array, index: number) => words[index] ?? 0;

/** The message, a 1 bit, zeros, and its length in bits in the last 8 bytes, as a whole number of 64-byte blocks. */
function pad(message: Uint8Array): DataView {
  const blocks = Math.ceil((message.length + 9) / 64);
  const padded = new Uint8Array(blocks * 64);
  padded.set(message);
  padded[message.length] = 0x80;
  const view = new DataView(padded.buffer);
  view.setUint32(padded.length - 8, Math.floor((message.length * 8) / 2 ** 32));
  view.setUint32(padded.length - 4, (message.length * 8) >>> 0);
  return view;
}

function expand(view: DataView, offset: number, schedule: Uint32Array): void {
  for (let t = 0; t < 16; t += 1) schedule[t] = view.getUint32(offset + t * 4);
  for (let t = 16; t < 64; t += 1) {
    const [w15, w2] = [at(schedule, t - 15), at(schedule, t - 2)];
    const s0 = rotate(w15, 7) ^ rotate(w15, 18) ^ (w15 >>> 3);
    const s1 = rotate(w2, 17) ^ rotate(w2, 19) ^ (w2 >>> 10);
    schedule[t] = at(schedule, t - 16) + s0 + at(schedule, t - 7) + s1;
  }
}

function compress(state: Uint32Array, schedule: Uint32Array): void {
  let [a, b, c, d, e, f, g, h] = [0, 1, 2, 3, 4, 5, 6, 7].map((index) => at(state, index)) as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number, // eight words by construction
  ];
  for (let t = 0; t < 64; t += 1) {
    const s1 = rotate(e, 6) ^ rotate(e, 11) ^ rotate(e, 25);
    const t1 = (h + s1 + ((e & f) ^ (~e & g)) + at(constants, t) + at(schedule, t)) | 0;
    const s0 = rotate(a, 2) ^ rotate(a, 13) ^ rotate(a, 22);
    const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
    [h, g, f, e, d, c, b, a] = [g, f, e, (d + t1) | 0, c, b, a, (t1 + t2) | 0];
  }
  [a, b, c, d, e, f, g, h].forEach((word, index) => {
    state[index] = at(state, index) + word;
  });
}

/** SHA-256 of bytes, as 64 lower-case hex digits. */
export function sha256Hex(message: Uint8Array): string {
  const view = pad(message);
  const state = Uint32Array.from(initial);
  const schedule = new Uint32Array(64);
  for (let offset = 0; offset < view.byteLength; offset += 64) {
    expand(view, offset, schedule);
    compress(state, schedule);
  }
  return Array.from(state, (word) => word.toString(16).padStart(8, "0")).join("");
}
