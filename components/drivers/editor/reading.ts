import { indexPlaces, jsonPlaces, lineOfProblem } from "@/components/drivers/editor/json-places";
import type { JsonPlace } from "@/components/drivers/editor/json-places";
import { fieldPlace } from "@/components/drivers/editor/field-help";
import { definitionHead } from "@/lib/contracts/driver";
import type { DraftChange } from "@/lib/contracts/driver";
import type { PathMessage } from "@/lib/result";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { parseDefinition, readDefinitionText } from "@/lib/serial/driver/parse-definition";

export type PlacedProblem = PathMessage & { /** Counted from 1; null: the whole text. */ readonly line: number | null };

/** What the page makes of the text in the editor. */
export type Reading = {
  readonly text: string;
  readonly places: readonly JsonPlace[];
  readonly problems: readonly PlacedProblem[];
  /** Null while it does not compile. */
  readonly driver: CompiledDriver | null;
  /** What can be saved: a draft may be unfinished, and has to be JSON that names itself. Null: it cannot. */
  readonly savable: DraftChange["definition"] | null;
};

/** Reads, checks and compiles the text. Bounded as `parseDefinition` is, whatever was typed. */
export function readText(text: string): Reading {
  const places = jsonPlaces(text);
  const index = indexPlaces(places);
  const json = readDefinitionText(text);
  const parsed = json.ok ? parseDefinition(json.value) : json;
  const head = json.ok ? definitionHead.safeParse(json.value) : null;
  return {
    text,
    places,
    problems: parsed.ok ? [] : parsed.error.map((problem) => ({ ...problem, line: lineOfProblem(text, index, problem) })),
    driver: parsed.ok ? parsed.value.driver : null,
    // As it was typed: the parsed head has its texts trimmed. The cast holds, since the head was found in it.
    savable: json.ok && head?.success === true ? (json.value as DraftChange["definition"]) : null,
  };
}

/** The same value with its fields in the order of the format: the database keeps them in another. Bounded by its depth, 32. */
function inOrder(value: unknown, path: string): unknown {
  if (Array.isArray(value)) return value.map((inner: unknown, index) => inOrder(inner, `${path}[${index}]`));
  if (typeof value !== "object" || value === null) return value;
  const fields = Object.entries(value).map(([name, inner]: [string, unknown]) => {
    const at = path === "" ? name : `${path}.${name}`;
    return { name, place: fieldPlace(at), inner: inOrder(inner, at) };
  });
  const byPlace = [...fields].sort((left, right) => (left.place === right.place ? 0 : left.place - right.place));
  return Object.fromEntries(byPlace.map(({ name, inner }) => [name, inner]));
}

/** A definition as the editor shows it. */
export function textOf(definition: unknown): string {
  return `${JSON.stringify(inOrder(definition, ""), null, 2)}\n`;
}
