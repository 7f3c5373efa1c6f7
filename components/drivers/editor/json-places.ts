/**
 * Places in a JSON text by path, and paths by place, so that a complaint leads to its line and a caret to its help.
 *
 * One pass over the text, which may be broken: what comes before the break is still found. Paths are written as complaints write
 * them (`settings[3].wire.read.reply`).
 */
export type JsonPlace = {
  readonly path: string;
  /** Of the field's name, or of the entry where it stands in a list. */
  readonly start: number;
  /** After the value. */
  readonly end: number;
};

/** Levels that are followed; a definition has 32 at most. */
const MAX_LEVELS = 64;
/** Places that are noted: a text of 512 KiB cannot have more values that differ. */
const MAX_PLACES = 200_000;

type Level = { readonly path: string; readonly isList: boolean; index: number; key: { readonly name: string; readonly start: number } | null; readonly start: number };

/** The end of a text that begins with a quote; the end of everything where it does not close. */
function textEnd(text: string, start: number): number {
  for (let at = start + 1; at < text.length; at += 1) {
    if (text[at] === "\\") at += 1;
    else if (text[at] === '"') return at + 1;
  }
  return text.length;
}

function nameOf(text: string, start: number, end: number): string {
  try {
    const name: unknown = JSON.parse(text.slice(start, end));
    return typeof name === "string" ? name : "";
  } catch (error) {
    // A name that is still being typed.
    if (error instanceof SyntaxError) return text.slice(start + 1, end);
    throw error;
  }
}

function childPath({ path, isList, index, key }: Level): string {
  if (isList) return `${path}[${index}]`;
  const name = key?.name ?? "";
  return path === "" ? name : `${path}.${name}`;
}

const PLAIN = /[^\s,:[\]{}"]/u;

/** All places of a text, in the order of their ends. */
export function jsonPlaces(text: string): readonly JsonPlace[] {
  const places: JsonPlace[] = [];
  const levels: Level[] = [];
  const note = (start: number, end: number) => {
    const level = levels.at(-1);
    if (level !== undefined && places.length < MAX_PLACES) places.push({ path: childPath(level), start: level.key?.start ?? start, end });
  };
  for (let at = 0; at < text.length; ) {
    const level = levels.at(-1);
    const character = text[at] ?? "";
    if (character === "{" || character === "[") {
      if (levels.length >= MAX_LEVELS) return places;
      levels.push({ path: level === undefined ? "" : childPath(level), isList: character === "[", index: 0, key: null, start: level?.key?.start ?? at });
      at += 1;
    } else if (character === "}" || character === "]") {
      levels.pop();
      note(level?.start ?? at, at + 1);
      at += 1;
    } else if (character === ",") {
      if (level !== undefined) {
        level.index += 1;
        level.key = null;
      }
      at += 1;
    } else if (character === '"') {
      const end = textEnd(text, at);
      if (level !== undefined && !level.isList && level.key === null) level.key = { name: nameOf(text, at, end), start: at };
      else note(at, end);
      at = end;
    } else if (PLAIN.test(character)) {
      const start = at;
      while (at < text.length && PLAIN.test(text[at] ?? "")) at += 1;
      note(start, at);
    } else at += 1;
  }
  // What is still open reaches to the end of the text.
  for (let open = levels.pop(); open !== undefined; open = levels.pop()) {
    places.push({ path: open.path, start: open.start, end: text.length });
  }
  return places;
}

export type PlaceIndex = ReadonlyMap<string, JsonPlace>;

/** Places by path; where a name stands twice in one group, the last, which is the one that JSON reads. */
export function indexPlaces(places: readonly JsonPlace[]): PlaceIndex {
  return new Map(places.map((place) => [place.path, place]));
}

/** The place of a path, or of the nearest part of it that is there. Null: nothing of it is. Names may have points in them. */
export function placeOf(index: PlaceIndex, path: string): JsonPlace | null {
  for (let part = path; part !== ""; part = part.slice(0, Math.max(part.lastIndexOf("."), part.lastIndexOf("["), 0))) {
    const place = index.get(part);
    if (place !== undefined) return place;
  }
  return null;
}

/** The path of the smallest value that a place in the text lies in; empty outside all. */
export function pathAt(places: readonly JsonPlace[], offset: number): string {
  let best: JsonPlace | null = null;
  for (const place of places) {
    const holds = place.start <= offset && offset <= place.end;
    if (holds && (best === null || place.end - place.start < best.end - best.start)) best = place;
  }
  return best?.path ?? "";
}

/** Line of a place, counted from 1. */
export function lineOf(text: string, offset: number): number {
  let line = 1;
  for (let at = text.indexOf("\n"); at !== -1 && at < offset; at = text.indexOf("\n", at + 1)) line += 1;
  return line;
}

/** The line that a complaint is about. A text that is no JSON says its line in its message; else null stands for the whole. */
export function lineOfProblem(text: string, index: PlaceIndex, { path, message }: { readonly path: string; readonly message: string }): number | null {
  if (path === "") {
    const told = /line (\d+)/u.exec(message)?.[1];
    return told === undefined ? null : Number(told);
  }
  const place = placeOf(index, path);
  return place === null ? null : lineOf(text, place.start);
}
