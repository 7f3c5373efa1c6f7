import { fail, ok, type Result } from "@/lib/result";
import type { Fields } from "@/lib/serial/driver/compiled";
import type { NativeValue } from "@/lib/serial/native";

/** `decimals` shows a whole number with a point (`fixed1`: 960 is `96.0`). */
export type Hole =
  | { readonly name: string; readonly type: "number"; readonly decimals: 0 | 1 | 2 | 3 }
  | { readonly name: string; readonly type: "word" }
  | { readonly name: string; readonly type: "text"; readonly maxLength: number };

type Token = { readonly literal: string } | { readonly hole: Hole };

/** A template read once: literals and holes in turn, so that filling and parsing are one pass. */
export type Template = { readonly tokens: readonly Token[]; readonly holes: readonly Hole[] };

/** Digits of the largest whole number that a hole takes: within what a double holds exactly. */
const MAX_DIGITS = 15;
const MAX_WORD = 32;
const MAX_HOLES = 16;

function parseHole(body: string): Result<Hole, string> {
  const colon = body.indexOf(":");
  const name = body.slice(0, colon);
  const type = body.slice(colon + 1);
  if (colon < 1 || !/^[A-Za-z][A-Za-z0-9]{0,31}$/u.test(name)) return fail(`{${body}} is no hole: it wants a name and a type, as {value:int}`);
  if (type === "int") return ok({ name, type: "number", decimals: 0 });
  if (type === "fixed1") return ok({ name, type: "number", decimals: 1 });
  if (type === "fixed2") return ok({ name, type: "number", decimals: 2 });
  if (type === "fixed3") return ok({ name, type: "number", decimals: 3 });
  if (type === "word") return ok({ name, type: "word" });
  const length = /^text([1-9][0-9]?)$/u.exec(type)?.[1];
  if (length !== undefined && Number(length) <= 64) return ok({ name, type: "text", maxLength: Number(length) });
  return fail(`{${body}} has an unknown type: int, fixed1 to fixed3, word, text1 to text64 are known`);
}

/**
 * Reads a template. Two holes must have text between them, or where one ends could not be told.
 * Errors: one sentence.
 */
export function compileTemplate(source: string): Result<Template, string> {
  const tokens: Token[] = [];
  let at = 0;
  while (at < source.length) {
    const open = source.indexOf("{", at);
    if (open === -1 || open > at) tokens.push({ literal: source.slice(at, open === -1 ? source.length : open) });
    if (open === -1) break;
    const close = source.indexOf("}", open);
    if (close === -1) return fail("a { has no }");
    const hole = parseHole(source.slice(open + 1, close));
    if (!hole.ok) return hole;
    const last = tokens.at(-1);
    if (last && "hole" in last) return fail(`{${last.hole.name}} and {${hole.value.name}} touch: put something between them`);
    tokens.push({ hole: hole.value });
    at = close + 1;
  }
  const holes = holesOf(tokens);
  if (holes.length > MAX_HOLES) return fail(`has more than ${MAX_HOLES} holes`);
  if (new Set(holes.map((hole) => hole.name)).size !== holes.length) return fail("names a hole twice");
  return ok({ tokens, holes });
}

function holesOf(tokens: readonly Token[]): Hole[] {
  return tokens.flatMap((token) => ("hole" in token ? [token.hole] : []));
}

/** Puts some holes' values in for good (slot and mode numbers), joining the literals. */
export function bindTemplate(template: Template, fields: Fields): Template {
  const tokens: Token[] = [];
  for (const token of template.tokens) {
    const value = "hole" in token ? fields[token.hole.name] : undefined;
    if ("hole" in token && value === undefined) {
      tokens.push(token);
      continue;
    }
    const literal = "hole" in token ? showValue(token.hole, value ?? "") : token.literal;
    const last = tokens.at(-1);
    if (last && "literal" in last) tokens[tokens.length - 1] = { literal: last.literal + literal };
    else tokens.push({ literal });
  }
  return { tokens, holes: holesOf(tokens) };
}

function showValue(hole: Hole, value: NativeValue): string {
  if (hole.type !== "number" || typeof value !== "number" || hole.decimals === 0) return String(value);
  const digits = String(Math.abs(value)).padStart(hole.decimals + 1, "0");
  return `${value < 0 ? "-" : ""}${digits.slice(0, -hole.decimals)}.${digits.slice(-hole.decimals)}`;
}

/** Text of a template with its holes filled. Every hole must be given. */
export function fillTemplate(template: Template, fields: Fields): string {
  return template.tokens
    .map((token) => {
      if ("literal" in token) return token.literal;
      const value = fields[token.hole.name];
      if (value === undefined) throw new Error(`The hole ${token.hole.name} was given no value`);
      return showValue(token.hole, value);
    })
    .join("");
}

/** The text up to the first hole. */
export function leadOf(template: Template): string {
  const first = template.tokens[0];
  return first && "literal" in first ? first.literal : "";
}

/** Only the one way to write a number is taken: what reads back as written is what was sent. */
function readNumber(hole: Hole & { type: "number" }, text: string): number | null {
  if (text.length > MAX_DIGITS + 2 || !/^-?[0-9]+(?:\.[0-9]+)?$/u.test(text)) return null;
  const value = Number(text.replace(".", ""));
  return showValue(hole, value) === text && !Object.is(value, -0) ? value : null;
}

function readHole(hole: Hole, text: string): NativeValue | null {
  if (hole.type === "number") return readNumber(hole, text);
  if (hole.type === "word") return text.length <= MAX_WORD && /^[A-Za-z0-9_-]+$/u.test(text) ? text : null;
  return text.length <= hole.maxLength ? text : null;
}

/**
 * Reads a line by a template in one pass: a hole ends where the literal after it first stands, the last one at the line's end.
 * @returns the holes' values, or null where the line does not fit
 */
export function parseTemplate(template: Template, line: string): Record<string, NativeValue> | null {
  const fields: Record<string, NativeValue> = {};
  let at = 0;
  for (const [index, token] of template.tokens.entries()) {
    if ("literal" in token) {
      if (!line.startsWith(token.literal, at)) return null;
      at += token.literal.length;
      continue;
    }
    const next = template.tokens[index + 1];
    const end = next && "literal" in next ? line.indexOf(next.literal, at) : line.length;
    if (end === -1) return null;
    const value = readHole(token.hole, line.slice(at, end));
    if (value === null) return null;
    fields[token.hole.name] = value;
    at = end;
  }
  return at === line.length ? fields : null;
}
