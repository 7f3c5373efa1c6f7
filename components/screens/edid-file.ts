import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { BLOCK_BYTES, MAX_BLOCKS } from "@/lib/timing/edid/block";
import { envelopeOfEdid } from "@/lib/timing/edid/edid-screen";
import type { EdidReading } from "@/lib/timing/edid/edid-types";
import { parseEdid } from "@/lib/timing/edid/parse-edid";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

/** An EDID as Screens shows it; `address` is the text that carries its bytes from page to page. */
export type EdidView = {
  readonly address: string;
  readonly reading: EdidReading;
  readonly screen: ScreenEnvelope;
  readonly notes: readonly string[];
  readonly warnings: readonly string[];
};

/** Blocks that an address can carry: 2 048 bytes make 2 731 letters, which every server and browser takes. */
const MOST_BLOCKS = 16;

/** No EDID file is longer; a longer file is not read into memory. */
export const MAX_EDID_BYTES = MAX_BLOCKS * BLOCK_BYTES;

/** Base 64 with letters that an address needs not escape. Source: RFC 4648, section 5. */
function toAddress(bytes: Uint8Array): string {
  return btoa(String.fromCharCode(...bytes))
    .replaceAll("+", "-")
    .replaceAll("/", "_")
    .replace(/=+$/u, "");
}

function fromAddress(text: string): Uint8Array | null {
  if (text.length > Math.ceil((MOST_BLOCKS * BLOCK_BYTES * 4) / 3) || !/^[\w-]*$/u.test(text)) return null;
  try {
    return Uint8Array.from(atob(text.replaceAll("-", "+").replaceAll("_", "/")), (letter) => letter.charCodeAt(0));
  } catch {
    // `atob` throws on a text that was cut: no EDID then.
    return null;
  }
}

/** Reads the bytes of a file. Errors: why they are no EDID, as a sentence. */
export function edidOfBytes(bytes: Uint8Array): Result<EdidView, string> {
  const reading = parseEdid(bytes);
  if (!reading.ok) return fail(reading.error.message);
  const { screen, notes } = envelopeOfEdid(reading.value);
  const cut = bytes.length > MOST_BLOCKS * BLOCK_BYTES;
  if (cut) {
    const part = edidOfBytes(bytes.slice(0, MOST_BLOCKS * BLOCK_BYTES));
    if (!part.ok) return part;
    return ok({ ...part.value, notes: [`Only its first ${MOST_BLOCKS} blocks are read here.`, ...part.value.notes] });
  }
  return ok({
    address: toAddress(bytes),
    reading: reading.value,
    screen,
    notes,
    warnings: reading.value.warnings,
  });
}

/** Reads the EDID that an address carries. */
export function edidOfAddress(text: string): Result<EdidView, string> {
  const bytes = fromAddress(text);
  return bytes === null ? fail("This address carries no whole EDID: choose the file again.") : edidOfBytes(bytes);
}

/** "PAN 0x10ab", or with its name. */
export function productWords({ product }: EdidReading): string {
  const code = `${product.maker} ${product.code.toString(16).padStart(4, "0")}`;
  return product.name === undefined ? code : `${product.name} (${code})`;
}

/** What is kept with a screen: which EDID its limits are from, and how its rates were found. */
export function edidNotes({ reading, notes }: EdidView): string {
  const { version, product, sizeCm } = reading;
  const parts = [
    `Limits from the EDID ${version} of ${productWords(reading)}`,
    product.serial === undefined ? undefined : `serial ${product.serial}`,
    product.year === undefined ? undefined : `${product.year}`,
    sizeCm === undefined ? undefined : `${sizeCm.width} × ${sizeCm.height} cm`,
  ].filter((part) => part !== undefined);
  return `${parts.join(", ")}. ${notes[0] ?? ""}`.trim();
}
