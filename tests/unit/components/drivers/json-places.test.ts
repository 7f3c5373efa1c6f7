import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { indexPlaces, jsonPlaces, lineOf, lineOfProblem, pathAt, placeOf } from "@/components/drivers/editor/json-places";

/** Every value of a JSON value by its path, written as complaints write it. */
function valuesByPath(value: unknown, path = "", into = new Map<string, unknown>()): Map<string, unknown> {
  if (path !== "") into.set(path, value);
  if (Array.isArray(value)) value.forEach((inner, index) => valuesByPath(inner, `${path}[${index}]`, into));
  else if (typeof value === "object" && value !== null) {
    for (const [name, inner] of Object.entries(value)) valuesByPath(inner, path === "" ? name : `${path}.${name}`, into);
  }
  return into;
}

const names = fc.stringMatching(/^[a-z]{1,6}$/u);
const documents = fc.letrec((tie) => ({
  value: fc.oneof({ maxDepth: 4 }, fc.integer(), fc.string(), fc.boolean(), fc.constant(null), tie("list"), tie("group")),
  list: fc.array(tie("value"), { maxLength: 4 }),
  group: fc.dictionary(names, tie("value"), { maxKeys: 4, noNullPrototype: true }),
})).group;

describe("places of a JSON text", () => {
  // What JSON.parse makes of the stretch of each place is what the document holds there.
  it("finds every value of a document, whatever its layout, and nothing else", () => {
    fc.assert(
      fc.property(documents, fc.constantFrom(undefined, 2, "\t"), (document, indent) => {
        const text = JSON.stringify(document, null, indent);
        const index = indexPlaces(jsonPlaces(text));
        const expected = valuesByPath(document);
        expect([...index.keys()].sort()).toEqual([...expected.keys()].sort());
        for (const [path, { start, end }] of index) {
          const part = text.slice(start, end);
          const read: unknown = path.endsWith("]") ? JSON.parse(part) : Object.values(JSON.parse(`{${part}}`) as object)[0];
          expect(read).toEqual(expected.get(path));
        }
      }),
    );
  });

  it("never throws and never fails to end, whatever is typed", () => {
    fc.assert(
      fc.property(fc.array(fc.constantFrom("{", "}", "[", "]", ",", ":", '"', "\\", "a", "1", " ", "\n"), { maxLength: 200 }), (typed) => {
        const text = typed.join("");
        for (const { start, end } of jsonPlaces(text)) expect(start).toBeLessThanOrEqual(end);
      }),
    );
  });

  it("leads a complaint to its line, and one about a missing field to the line of what it is missing in", () => {
    const text = JSON.stringify({ slug: "a", settings: [{ key: "x" }, { key: "y", wire: { kind: "text" } }] }, null, 2);
    const index = indexPlaces(jsonPlaces(text));
    const line = (path: string) => lineOfProblem(text, index, { path, message: "is wrong" });
    expect(text.split("\n")[(line("settings[1].wire.kind") ?? 0) - 1]).toContain('"kind"');
    expect(line("settings[1].wire.read.reply")).toBe(line("settings[1].wire"));
    expect(line("transport.baudRate")).toBeNull();
    expect(lineOfProblem(text, index, { path: "", message: "This is not JSON. It breaks off at line 7, column 3." })).toBe(7);
  });

  it("finds a name that has points and brackets in it", () => {
    const text = '{\n  "factory": {\n    "slots[1].name": "A"\n  }\n}';
    const place = placeOf(indexPlaces(jsonPlaces(text)), "factory.slots[1].name");
    expect(place && lineOf(text, place.start)).toBe(3);
  });

  it("knows the field that the caret stands in, also in a text that breaks off", () => {
    const text = '{"pace": {"retries": 3, "gapMs": ';
    const places = jsonPlaces(text);
    expect(pathAt(places, text.indexOf("3"))).toBe("pace.retries");
    expect(pathAt(places, text.length)).toBe("pace");
  });
});
