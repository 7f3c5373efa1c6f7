import { canonicalJson } from "@/lib/profile/canonical";

/** One place where two definitions differ; null stands for "not there". */
export type DefinitionChange = { readonly path: string; readonly left: unknown; readonly right: unknown };

/** Differences that are told. Two drivers of other devices differ in nearly every line. */
export const MAX_DEFINITION_CHANGES = 500;

type Pair = { readonly path: string; readonly left: unknown; readonly right: unknown };
type Group = Readonly<Record<string, unknown>>;

const isGroup = (value: unknown): value is Group => typeof value === "object" && value !== null && !Array.isArray(value);

/** What an entry of a list is known by, so that one more setting does not shift all that follow. */
function nameOf(entry: unknown): string | null {
  if (!isGroup(entry)) return null;
  const name = entry["key"] ?? entry["name"] ?? entry["native"];
  return typeof name === "string" || typeof name === "number" ? String(name) : null;
}

/** A list by the names of its entries, or by their places where not all have one of their own. */
function entriesOf(list: readonly unknown[]): ReadonlyMap<string, unknown> {
  const names = list.map(nameOf);
  const named = names.every((name) => name !== null) && new Set(names).size === names.length;
  return new Map(list.map((entry, index) => [named ? (names[index] ?? "") : String(index), entry]));
}

function partsOf({ path, left, right }: Pair): readonly Pair[] | null {
  if (Array.isArray(left) && Array.isArray(right)) {
    const [was, is] = [entriesOf(left), entriesOf(right)];
    return [...new Set([...was.keys(), ...is.keys()])].map((name) => ({ path: `${path}[${name}]`, left: was.get(name) ?? null, right: is.get(name) ?? null }));
  }
  if (!isGroup(left) || !isGroup(right)) return null;
  const own = (group: Group, name: string): unknown => (Object.hasOwn(group, name) ? group[name] : null);
  return [...new Set([...Object.keys(left), ...Object.keys(right)])].map((name) => ({ path: path === "" ? name : `${path}.${name}`, left: own(left, name), right: own(right, name) }));
}

/**
 * What differs between two definitions, by path; entries of lists are matched by their key or name (`settings[slots[*].name].label`).
 * @param left, right as stored: what JSON gave, within the bounds of a definition
 * @returns `MAX_DEFINITION_CHANGES` at most, and whether there are more
 */
export function diffDefinitions(left: unknown, right: unknown): { readonly changes: readonly DefinitionChange[]; readonly more: boolean } {
  const changes: DefinitionChange[] = [];
  const open: Pair[] = [{ path: "", left, right }];
  for (let pair = open.pop(); pair !== undefined; pair = open.pop()) {
    if (pair.left === pair.right) continue;
    const parts = partsOf(pair);
    if (parts) open.push(...[...parts].reverse());
    else if (canonicalJson(pair.left ?? null) !== canonicalJson(pair.right ?? null)) {
      if (changes.length === MAX_DEFINITION_CHANGES) return { changes, more: true };
      changes.push(pair);
    }
  }
  return { changes, more: false };
}
