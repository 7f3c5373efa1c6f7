import { profileModeSchema, profileSlotSchema, profileDocumentSchema } from "./document";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "./document";
import type { DocumentPatch } from "./finding";
import { neutralSetting } from "./neutral-settings";

/** A path taken apart: which part of the document, and the fields inside it. */
export type DocumentPath =
  | { readonly scope: "document"; readonly fields: readonly string[] }
  | { readonly scope: "slot"; readonly number: number; readonly fields: readonly string[] }
  | { readonly scope: "mode"; readonly key: string; readonly fields: readonly string[] };

/** Longer than any path of a document within its limits: a key of 64 characters, each escaped, and its fields. */
const MAX_PATH_LENGTH = 400;

function withField(head: string, field: string): string {
  return field === "" ? head : `${head}.${field}`;
}

/** `slots[4].placement.offsetPx` */
export function slotPath(number: number, field = ""): string {
  return withField(`slots[${number}]`, field);
}

/** `modes[a].timing`. A `]` or `\` of the key is written with a `\` before it, so that every key can be read back. */
export function modePath(key: string, field = ""): string {
  return withField(`modes[${key.replace(/[\]\\]/gu, "\\$&")}]`, field);
}

/** The key after `modes[`, unescaped, and where the text goes on after its `]`. */
function readKey(path: string, from: number): { key: string; next: number } | null {
  let key = "";
  for (let at = from; at < path.length; at += 1) {
    const character = path.charAt(at);
    if (character === "]") return { key, next: at + 1 };
    if (character === "\\") at += 1;
    key += path.charAt(at);
  }
  return null;
}

function readFields(rest: string): readonly string[] | null {
  if (rest === "") return [];
  if (!rest.startsWith(".")) return null;
  const fields = rest.slice(1).split(".");
  return fields.every((field) => /^[a-zA-Z]+$/u.test(field)) ? fields : null;
}

/** Takes a path apart; null where it is none. */
export function parsePath(path: string): DocumentPath | null {
  if (path.length > MAX_PATH_LENGTH) return null;
  const slot = /^slots\[(\d{1,9})\]/u.exec(path);
  if (slot) {
    const fields = readFields(path.slice(slot[0].length));
    return fields && { scope: "slot", number: Number(slot[1]), fields };
  }
  if (path.startsWith("modes[")) {
    const read = readKey(path, "modes[".length);
    const fields = read && readFields(path.slice(read.next));
    return read && fields && { scope: "mode", key: read.key, fields };
  }
  const fields = readFields(`.${path}`);
  return fields && { scope: "document", fields };
}

/** The pattern of a path: `slots[4].name` → `slots[*].name`. Null where it is no path. */
export function patternOf(path: string): string | null {
  const parsed = parsePath(path);
  if (!parsed) return null;
  const fields = parsed.fields.join(".");
  if (parsed.scope === "document") return fields;
  return withField(parsed.scope === "slot" ? "slots[*]" : "modes[*]", fields);
}

type Fields = Readonly<Record<string, unknown>>;

function isFields(value: unknown): value is Fields {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

function getIn(from: unknown, fields: readonly string[]): unknown {
  return fields.reduce<unknown>(
    (value, field) => (isFields(value) && Object.hasOwn(value, field) ? value[field] : undefined),
    from,
  );
}

/** A copy with one value set, or taken out where it is `undefined`. */
function setIn(from: Fields, fields: readonly string[], value: unknown): Fields {
  const [field, ...rest] = fields;
  if (field === undefined) return from;
  if (rest.length > 0) {
    const inner = from[field];
    return { ...from, [field]: setIn(isFields(inner) ? inner : {}, rest, value) };
  }
  if (value !== undefined) return { ...from, [field]: value };
  return Object.fromEntries(Object.entries(from).filter(([name]) => name !== field));
}

export function findSlot(document: ProfileDocument, number: number): ProfileSlot | undefined {
  return document.slots?.find((slot) => slot.number === number);
}

export function findMode(document: ProfileDocument, key: string): ProfileMode | undefined {
  return document.modes?.find((mode) => mode.key === key);
}

/** The value at a path, or undefined. */
export function getValue(document: ProfileDocument, path: string): unknown {
  const parsed = parsePath(path);
  if (!parsed) return undefined;
  if (parsed.scope === "document") return getIn(document, parsed.fields);
  const owner = parsed.scope === "slot" ? findSlot(document, parsed.number) : findMode(document, parsed.key);
  return getIn(owner, parsed.fields);
}

function setSlot(
  document: ProfileDocument,
  number: number,
  fields: readonly string[],
  value: unknown,
): ProfileDocument {
  const slots = document.slots ?? [];
  const known = slots.some((slot) => slot.number === number);
  const all: readonly ProfileSlot[] = known ? slots : [...slots, { number }].sort((a, b) => a.number - b.number);
  const change = (slot: ProfileSlot) => profileSlotSchema.parse(setIn(slot, fields, value));
  return { ...document, slots: all.map((slot) => (slot.number === number ? change(slot) : slot)) };
}

function setMode(document: ProfileDocument, key: string, fields: readonly string[], value: unknown): ProfileDocument {
  const modes = document.modes ?? [];
  const known = modes.some((mode) => mode.key === key);
  const all: readonly ProfileMode[] = known ? modes : [...modes, { key }];
  const change = (mode: ProfileMode) => profileModeSchema.parse(setIn(mode, fields, value));
  return { ...document, modes: all.map((mode) => (mode.key === key ? change(mode) : mode)) };
}

function applyOne(document: ProfileDocument, patch: DocumentPatch): ProfileDocument {
  const parsed = parsePath(patch.path);
  const pattern = patternOf(patch.path);
  if (!parsed || pattern === null || !neutralSetting(pattern)) throw new RangeError(`No setting at ${patch.path}`);
  const value = patch.value ?? undefined;
  if (parsed.scope === "slot") return setSlot(document, parsed.number, parsed.fields, value);
  if (parsed.scope === "mode") return setMode(document, parsed.key, parsed.fields, value);
  return profileDocumentSchema.parse(setIn(document, parsed.fields, value));
}

/**
 * Sets values by path; `null` takes one out. A slot or mode that is not there is added.
 *
 * Throws where a path names no setting or a value is not of its kind, or where a timing would be left in part:
 * patches are made by the product itself, never read from a file.
 */
export function applyPatch(document: ProfileDocument, patches: readonly DocumentPatch[]): ProfileDocument {
  return patches.reduce(applyOne, document);
}
