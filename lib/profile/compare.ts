import { profileDocumentSchema, type ProfileDocument } from "./document";
import { modePath, slotPath } from "./paths";
import { knownFields, itemSchema } from "./schema-shape";

/** One value that differs. `null` stands for "not named". `unit` is empty for texts and words. */
export type DocumentChange = {
  readonly path: string;
  readonly left: unknown;
  readonly right: unknown;
  readonly unit: string;
};

const unitsBySuffix: readonly (readonly [suffix: string, unit: string])[] = [
  ["Px", "px"],
  ["Lines", "lines"],
  ["Pct", "%"],
  ["Hz", "Hz"],
  ["Us", "µs"],
  ["Vpp", "V"],
  ["Ohm", "Ω"],
];

/** The unit that a path's own name states, or that the axis of a timing gives. */
export function unitOf(path: string): string {
  if (/\.horizontal\.(active|frontPorch|sync|backPorch)$/u.test(path)) return "px";
  if (/\.vertical\.(active|frontPorch|sync|backPorch)$/u.test(path)) return "lines";
  // `syncVpp[0]`, `visiblePct.left`: the unit stands before the last part.
  const name = path.replace(/\[\d+\]$/u, "").replace(/Pct\.[a-z]+$/u, "Pct");
  return unitsBySuffix.find(([suffix]) => name.endsWith(suffix))?.[1] ?? "";
}

type Pair = { readonly path: string; readonly left: unknown; readonly right: unknown; readonly schema: unknown };

function isGroup(value: unknown): value is object {
  return typeof value === "object" && value !== null;
}

/** Names of both sides: those of the format in its order, then the others by name. */
function namesOf({ left, right, schema }: Pair): string[] {
  const known = [...(knownFields(schema)?.keys() ?? [])];
  const present = new Set([left, right].filter(isGroup).flatMap((side) => Object.keys(side)));
  const others = [...present].filter((name) => !known.includes(name));
  const listed = others.every((name) => /^\d+$/u.test(name));
  others.sort(listed ? (a, b) => Number(a) - Number(b) : (a, b) => (a < b ? -1 : 1));
  return [...known.filter((name) => present.has(name)), ...others];
}

function inner(side: unknown, name: string): unknown {
  if (!isGroup(side) || !Object.hasOwn(side, name)) return undefined;
  return (side as Readonly<Record<string, unknown>>)[name]; // own field of an object, checked above
}

function comparePair(pair: Pair): DocumentChange[] {
  const { path, left, right, schema } = pair;
  if (!isGroup(left) && !isGroup(right)) {
    if ((left ?? null) === (right ?? null)) return [];
    return [{ path, left: left ?? null, right: right ?? null, unit: unitOf(path) }];
  }
  const isList = Array.isArray(left) || Array.isArray(right);
  return namesOf(pair).flatMap((name) => {
    const at = isList ? `${path}[${name}]` : `${path}${path === "" ? "" : "."}${name}`;
    const next = isList ? itemSchema(schema) : knownFields(schema)?.get(name);
    return comparePair({ path: at, left: inner(left, name), right: inner(right, name), schema: next });
  });
}

/** Pairs of two lists by what names their entries: those of the left first in order, then those only of the right. */
function pairUp<T, K>(
  left: readonly T[],
  right: readonly T[],
  keyOf: (entry: T) => K,
): [K, T | undefined, T | undefined][] {
  const [lefts, rights] = [left, right].map((list) => new Map(list.map((entry) => [keyOf(entry), entry])));
  const keys = new Set([...(lefts?.keys() ?? []), ...(rights?.keys() ?? [])]);
  return [...keys].map((key) => [key, lefts?.get(key), rights?.get(key)]);
}

/** Without what names the entry: a slot that only one side has is told by its values. */
function without<T extends object>(entry: T | undefined, name: string): object | undefined {
  return entry && Object.fromEntries(Object.entries(entry).filter(([field]) => field !== name));
}

/**
 * Every value that two documents name differently, in the document's order; slots by number, modes by key.
 *
 * Provenance is left out: it says who and when, not what.
 */
export function compareDocuments(left: ProfileDocument, right: ProfileDocument): DocumentChange[] {
  const fields = knownFields(profileDocumentSchema);
  const entry = (list: "modes" | "slots") => itemSchema(fields?.get(list));
  const rest = (document: ProfileDocument) => ({
    ...document,
    modes: undefined,
    slots: undefined,
    provenance: undefined,
  });
  const modes = pairUp(left.modes ?? [], right.modes ?? [], (mode) => mode.key).flatMap(([key, l, r]) =>
    comparePair({ path: modePath(key), left: without(l, "key"), right: without(r, "key"), schema: entry("modes") }),
  );
  const slots = pairUp(left.slots ?? [], right.slots ?? [], (slot) => slot.number)
    .sort(([a], [b]) => a - b)
    .flatMap(([number, l, r]) =>
      comparePair({
        path: slotPath(number),
        left: without(l, "number"),
        right: without(r, "number"),
        schema: entry("slots"),
      }),
    );
  return [
    ...comparePair({ path: "", left: rest(left), right: rest(right), schema: profileDocumentSchema }),
    ...modes,
    ...slots,
  ];
}
