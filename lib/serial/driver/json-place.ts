/** What may come next in a JSON text. */
type Wanted = "value" | "value-or-end" | "name" | "name-or-end" | "colon" | "comma-or-end" | "nothing";

const SPACE = /[ \t\n\r]*/uy;
// RFC 8259, sections 6 and 7: a string, a number, or one of the three words.
const STRING = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/uy;
const SCALAR = /-?(?:0|[1-9][0-9]*)(?:\.[0-9]+)?(?:[eE][+-]?[0-9]+)?|true|false|null/uy;

function endOf(pattern: RegExp, text: string, at: number): number {
  pattern.lastIndex = at;
  return pattern.test(text) ? pattern.lastIndex : at;
}

/**
 * Where a text stops being JSON: engines name the place in different words, or not at all. Linear, without recursion.
 * @returns the position of the first character that does not fit; the text's length where it ends too early; null: it is JSON
 */
export function jsonBreak(text: string): number | null {
  const open: ("{" | "[")[] = [];
  let wanted: Wanted = "value";
  let at = endOf(SPACE, text, 0);

  const afterValue = (): Wanted => (open.length === 0 ? "nothing" : "comma-or-end");

  // Each turn takes at least one character or ends.
  while (wanted !== "nothing") {
    const character = text[at] ?? "";
    const closes = open.at(-1) === "{" ? "}" : "]";
    let next = at;
    if (wanted === "colon") {
      if (character === ":") [next, wanted] = [at + 1, "value"];
    } else if (wanted.endsWith("-or-end") && open.length > 0 && character === closes) {
      open.pop();
      [next, wanted] = [at + 1, afterValue()];
    } else if (wanted === "comma-or-end") {
      if (character === ",") [next, wanted] = [at + 1, open.at(-1) === "{" ? "name" : "value"];
    } else if (wanted.startsWith("name")) {
      next = endOf(STRING, text, at);
      if (next > at) wanted = "colon";
    } else if (character === "{" || character === "[") {
      open.push(character);
      [next, wanted] = [at + 1, character === "{" ? "name-or-end" : "value-or-end"];
    } else {
      next = endOf(character === '"' ? STRING : SCALAR, text, at);
      if (next > at) wanted = afterValue();
    }
    if (next === at) return at;
    at = endOf(SPACE, text, next);
  }
  return at === text.length ? null : at;
}
