import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { bindTemplate, compileTemplate, fillTemplate, leadOf, parseTemplate, type Template } from "@/lib/serial/protocols/text/template";

function template(source: string): Template {
  const compiled = compileTemplate(source);
  if (!compiled.ok) throw new Error(compiled.error);
  return compiled.value;
}

describe("templates of the text protocol", () => {
  it("reads back any whole number as it was written, at any number of decimals", () => {
    const kinds = fc.constantFrom("int", "fixed1", "fixed2", "fixed3");
    fc.assert(
      fc.property(kinds, fc.integer({ min: -1e12, max: 1e12 }), (kind, value) => {
        const one = template(`A={v:${kind}},B`);
        expect(parseTemplate(one, fillTemplate(one, { v: value }))).toEqual({ v: value });
      }),
    );
  });

  it("shows fixed numbers as people write them", () => {
    const one = template("{v:fixed1}");
    expect([960, 4, 0, -5, -123].map((v) => fillTemplate(one, { v }))).toEqual(["96.0", "0.4", "0.0", "-0.5", "-12.3"]);
  });

  it("takes one way to write a number and no other", () => {
    const whole = template("{v:int}");
    for (const text of ["+1", "01", "-0", "1.0", "1e3", " 1", "1 ", "", "0x1", "９"]) expect(parseTemplate(whole, text)).toBeNull();
    for (const text of ["96", "96.", ".5", "96.00", "-0.0", "096.0"]) expect(parseTemplate(template("{v:fixed1}"), text)).toBeNull();
  });

  it("ends a hole at the text after it, the last one at the end of the line", () => {
    expect(parseTemplate(template("{code:int},\"{message:text20}\""), "-113,\"Undefined header\"")).toEqual({ code: -113, message: "Undefined header" });
    expect(parseTemplate(template("N={v:text16}"), "N=a*b=c")).toEqual({ v: "a*b=c" });
    expect(parseTemplate(template("N={v:text3}"), "N=four")).toBeNull();
  });

  it("refuses words with anything but letters, digits, hyphen and underscore", () => {
    expect(parseTemplate(template("{v:word}"), "D-1_x")).toEqual({ v: "D-1_x" });
    for (const text of ["", "a b", "a.b", "é"]) expect(parseTemplate(template("{v:word}"), text)).toBeNull();
  });

  it("puts slot numbers in once and keeps the other holes", () => {
    const bound = bindTemplate(template("SLOT{slot:int}:HPOS {value:int}"), { slot: 4 });
    expect(leadOf(bound)).toBe("SLOT4:HPOS ");
    expect(bound.holes.map((hole) => hole.name)).toEqual(["value"]);
  });

  it.each([
    ["{v:int", "no }"],
    ["{v}", "no hole"],
    ["{:int}", "no hole"],
    ["{v:float}", "unknown type"],
    ["{v:text99}", "unknown type"],
    ["{a:int}{b:int}", "touch"],
    ["{a:int},{a:int}", "twice"],
    [Array.from({ length: 17 }, (_, index) => `{h${index}:int}`).join(","), "more than"],
  ])("says what is wrong with %s", (source, part) => {
    const compiled = compileTemplate(source);
    expect(compiled.ok ? "" : compiled.error).toContain(part);
  });

  it("survives any text against any template", () => {
    const templates = ["A{v:int}", "{v:word}={w:text8}", "{v:text4}x{w:fixed2}x"].map(template);
    fc.assert(fc.property(fc.constantFrom(...templates), fc.string({ maxLength: 200 }), (one, text) => {
      const fields = parseTemplate(one, text);
      if (fields) expect(fillTemplate(one, fields)).toBe(text);
    }));
  });
});
