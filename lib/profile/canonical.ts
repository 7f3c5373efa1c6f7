import type { ProfileDocument } from "./document";
import { sha256Hex } from "./sha256";

function byCodeUnit(left: string, right: string): number {
  if (left === right) return 0;
  return left < right ? -1 : 1;
}

function canonicalText(text: string): string {
  if (!text.isWellFormed()) throw new TypeError("A text with half a surrogate pair has no canonical form");
  return JSON.stringify(text);
}

/**
 * Canonical JSON: one text for equal values, whatever the order of their fields.
 *
 * Fields that hold `undefined` are left out. Throws on what JSON cannot hold: NaN, infinities, functions, half a
 * surrogate pair. Nesting is bounded by the document's own limit of 64 levels.
 * Source: RFC 8785 (sections 3.2.2 and 3.2.3; its number and string forms are those of ECMAScript's JSON.stringify).
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === "boolean") return JSON.stringify(value);
  if (typeof value === "number" && Number.isFinite(value)) return JSON.stringify(value);
  if (typeof value === "string") return canonicalText(value);
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(",")}]`;
  if (typeof value === "object") {
    const fields = Object.entries(value)
      .filter(([, inner]) => inner !== undefined)
      .sort(([left], [right]) => byCodeUnit(left, right));
    return `{${fields.map(([name, inner]) => `${canonicalText(name)}:${canonicalJson(inner)}`).join(",")}}`;
  }
  throw new TypeError(`No canonical form for ${typeof value === "number" ? String(value) : typeof value}`);
}

/** SHA-256 over the canonical JSON of any value, as 64 hex digits. */
export function hashValue(value: unknown): string {
  return sha256Hex(new TextEncoder().encode(canonicalJson(value)));
}

/** The content hash of a document: everything but its provenance, so that who and when do not change it. */
export function hashDocument(document: ProfileDocument): string {
  return hashValue({ ...document, provenance: undefined });
}
