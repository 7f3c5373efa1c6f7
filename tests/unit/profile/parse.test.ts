import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { MAX_DOCUMENT_BYTES, MAX_DOCUMENT_DEPTH } from "@/lib/profile/document";
import { MAX_PROBLEMS } from "@/lib/profile/parse-problems";
import { parseDocument } from "@/lib/profile/parse";
import { serialiseDocument } from "@/lib/profile/serialise";
import { anyProfile, documentOf, oneSlot } from "./samples";

const head = '"format":"backporch-profile","version":1';
const refused = (input: unknown) => {
  const parsed = parseDocument(input);
  if (parsed.ok) throw new Error("was taken");
  return parsed.error;
};
const taken = (input: unknown) => {
  const parsed = parseDocument(input);
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.error));
  return parsed.value;
};

describe("parseDocument", () => {
  it("takes a document of nothing but its format: every value is optional", () => {
    expect(taken(`{${head}}`).document).toEqual({ format: "backporch-profile", version: 1 });
  });

  it("refuses an unknown version and says what to do", () => {
    const [problem] = refused('{"format":"backporch-profile","version":2}');
    expect(problem?.path).toBe("version");
    expect(problem?.message).toContain("version 2");
    expect(problem?.message).toContain("Update Backporch");
  });

  it("refuses what is no profile, no group, or no JSON", () => {
    expect(refused("{}")).toEqual([
      { path: "format", message: expect.stringContaining("backporch-profile") as string },
    ]);
    expect(refused("[]")).toHaveLength(1);
    expect(refused("<profile/>")[0]?.message).toContain("not JSON");
  });

  it("keeps unknown fields at every level and tells each by its position", () => {
    const text = `{${head},"later":1,"slots":[{"number":1,"placement":{"skewPct":3}}],"modes":[{"key":"a","x":{}}]}`;
    const { document, unknownFields } = taken(text);
    expect(unknownFields.map(({ path }) => path).sort()).toEqual(["later", "modes[0].x", "slots[0].placement.skewPct"]);
    expect(document).toMatchObject({ later: 1, slots: [{ placement: { skewPct: 3 } }], modes: [{ x: {} }] });
  });

  it("tells every complaint by its position, at most a hundred", () => {
    expect(
      refused(
        `{${head},"modes":[{"key":""}],"slots":[{"number":-1},{"number":1,"name":"a\\u0007b","syncKind":"loud"}]}`,
      ),
    ).toEqual([
      { path: "modes[0].key", message: "Its length must be at least 1." },
      { path: "slots[0].number", message: "Must be at least 0." },
      { path: "slots[1].name", message: "Must have no control characters." },
      { path: "slots[1].syncKind", message: "Must be one of: separate, composite, onGreen, onLuma." },
    ]);
    const many = Array.from({ length: 256 }, () => '{"number":"x"}').join(",");
    expect(refused(`{${head},"slots":[${many}]}`)).toHaveLength(MAX_PROBLEMS);
  });

  it("refuses a timing in part: it is whole or absent", () => {
    expect(
      refused(`{${head},"modes":[{"key":"a","timing":{"pixelClockHz":27000000}}]}`).map(({ path }) => path),
    ).toContain("modes[0].timing.horizontal");
  });

  it("refuses more than 256 modes or slots, more than 1 MiB, and more than 64 levels, as text and as a value", () => {
    const slots = (count: number) => Array.from({ length: count }, (_, number) => ({ number }));
    expect(taken(documentOf({ slots: slots(256) })).document.slots).toHaveLength(256);
    expect(refused(documentOf({ slots: slots(257) }))[0]?.path).toBe("slots");
    expect(refused(`{${head},"x":"${"é".repeat(MAX_DOCUMENT_BYTES / 2)}"}`)[0]?.message).toContain("1 MiB");
    const nested = (levels: number) => `{${head},"x":${"[".repeat(levels)}${"]".repeat(levels)}}`;
    expect(parseDocument(nested(MAX_DOCUMENT_DEPTH - 1)).ok).toBe(true);
    expect(refused(nested(MAX_DOCUMENT_DEPTH))[0]?.message).toContain("64 levels");
    expect(refused(nested(100_000))[0]?.message).toContain("64 levels");
    expect(refused(JSON.parse(nested(MAX_DOCUMENT_DEPTH + 1)))[0]?.message).toContain("64 levels");
  });

  it("does not count brackets inside texts as levels", () => {
    expect(parseDocument(`{${head},"notes":"\\"${"[{".repeat(200)}"}`).ok).toBe(true);
  });

  it("reads a list as long as a document can be", () => {
    expect(taken(`{${head},"x":[${"1,".repeat(500_000)}1]}`).unknownFields).toHaveLength(1);
    expect(refused(documentOf({ slots: Array.from({ length: 100_000 }, (_, number) => ({ number })) }))).toHaveLength(
      1,
    );
  });

  it("refuses a field named __proto__ and half a surrogate pair", () => {
    expect(refused(`{${head},"x":{"__proto__":{"slots":[]}}}`)[0]?.path).toBe("x.__proto__");
    expect(refused(`{${head},"title":"\\ud800"}`)[0]?.path).toBe("title");
  });

  it("answers any text and any value with a result, never with a throw", () => {
    fc.assert(
      fc.property(
        fc.oneof(fc.string(), fc.json(), fc.jsonValue()),
        (input) => typeof parseDocument(input).ok === "boolean",
      ),
    );
    fc.assert(
      fc.property(
        fc.jsonValue(),
        fc.constantFrom("modes", "slots", "everywhere", "madeFor"),
        (value, field) =>
          typeof parseDocument({ format: "backporch-profile", version: 1, [field]: value }).ok === "boolean",
      ),
    );
  });
});

describe("serialiseDocument", () => {
  it("gives equal bytes for equal documents, whatever the order of their fields", () => {
    const document = oneSlot({ name: "Cabinet A", placement: { offsetPx: 1, widthPct: 96 } });
    const { slots, modes, version, format } = document;
    expect(serialiseDocument({ slots, modes, version, format })).toBe(serialiseDocument(document));
    expect(serialiseDocument(document).endsWith("}\n")).toBe(true);
  });

  it("puts unknown fields after the known ones, by name", () => {
    const text = serialiseDocument({ zebra: 1, version: 1, apple: 2, format: "backporch-profile" });
    expect(text.match(/"\w+":/gu)).toEqual(['"format":', '"version":', '"apple":', '"zebra":']);
  });

  it("reads back what it wrote, and writes the same bytes again", () => {
    fc.assert(
      fc.property(anyProfile, (document) => {
        const text = serialiseDocument(document);
        const { document: read, unknownFields } = taken(text);
        expect(read).toEqual(document);
        expect(unknownFields).toEqual([]);
        expect(serialiseDocument(read)).toBe(text);
      }),
      { numRuns: 50 },
    );
  });
});
