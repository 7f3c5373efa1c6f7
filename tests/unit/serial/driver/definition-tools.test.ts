import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { commandBytes, commandsOf, pastedBytes, readReply, type Command } from "@/lib/serial/driver/command-words";
import { diffDefinitions, MAX_DEFINITION_CHANGES } from "@/lib/serial/driver/diff-definitions";
import { jsonBreak } from "@/lib/serial/driver/json-place";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";
import { readDifferently } from "@/lib/serial/driver/read-differently";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { compiled, lf8 } from "@/tests/unit/serial/simulated-rig";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

const text = JSON.stringify(lf8.definition, null, 2);
const problems = (input: unknown) => {
  const parsed = parseDefinition(input);
  return parsed.ok ? [] : parsed.error;
};
const changed = (edit: (definition: Record<string, unknown>) => void): unknown => {
  const copy = JSON.parse(text) as Record<string, unknown>;
  edit(copy);
  return copy;
};

describe("a definition that is read", () => {
  it("is the shipped ones, from text and from data", () => {
    expect(problems(text)).toEqual([]);
    for (const definition of shippedDrivers) expect(parseDefinition(definition)).toMatchObject({ ok: true, value: { definition } });
  });

  it("is told where its JSON breaks off", () => {
    const [first] = problems('{\n  "format": "backporch-driver",\n  "slug": }');
    expect(first).toEqual({ path: "", message: "This is not JSON. It breaks off at line 3, column 11." });
    expect(problems("")[0]?.message).toContain("empty");
    expect(problems('{"a": 1')[0]?.message).toBe("This is not JSON. It ends too early, at line 1, column 8.");
    expect(problems(`{"a":"${"x".repeat(600_000)}"}`)[0]?.message).toContain("512 KiB");
    expect(problems("[".repeat(100_000))[0]?.path).toBe("");
  });

  it("is told by path what is wrong, whichever part of it", () => {
    const at = (input: unknown) => problems(input).map(({ path }) => path);
    expect(at(changed((copy) => Object.assign(copy, { baud: 1 })))).toEqual([""]);
    expect(problems(changed((copy) => Object.assign(copy, { baud: 1 })))[0]?.message).toContain("baud");
    expect(at(changed((copy) => delete copy["slug"]))).toEqual(["slug"]);
    expect(at(changed((copy) => Object.assign(copy["transport"] as object, { baudRate: 0 })))).toEqual(["transport.baudRate"]);
    expect(at(changed((copy) => Object.assign((copy["settings"] as object[])[3] as object, { label: "" })))).toEqual(["settings[3].label"]);
    expect(at(changed((copy) => Object.assign(copy["factory"] as object, { "slots[1].nothing": 1 })))).toEqual(["factory.slots[1].nothing"]);
    expect(at(changed((copy) => Object.assign(copy["status"] as object, { activeSlot: { kind: "text", request: "A?", reply: "A={which:int}" } })))).toEqual(["status.activeSlot.reply"]);
    expect(at(changed((copy) => Object.assign(copy["actions"] as object, { recall: { kind: "text", request: "*RCL", reply: "*RCL" } })))).toEqual(["actions.recall.request"]);
    expect(at(changed((copy) => Object.assign(copy["actions"] as object, { commit: { kind: "text", request: "C {seconds:int}", reply: "C" } })))).toEqual(["actions.commit.request"]);
    expect(at({ ...lf8.definition, maker: "\ud800" })).toEqual(["maker"]);
  });
});

describe("the place where a text stops being JSON", () => {
  it("is none exactly where the engine's own parser takes the text", () => {
    const parses = (json: string) => {
      try {
        JSON.parse(json);
        return true;
      } catch {
        return false;
      }
    };
    fc.assert(fc.property(fc.json(), (json) => jsonBreak(json) === null));
    const bits = ["{", "}", "[", "]", ",", ":", '"a"', "1", "-0.5e+3", "01", "true", "nul", " ", "\n", '"\\u12"', "\\"];
    fc.assert(fc.property(fc.array(fc.constantFrom(...bits), { maxLength: 9 }), (parts) => (jsonBreak(parts.join("")) === null) === parses(parts.join(""))), { numRuns: 3000 });
    expect(jsonBreak("[".repeat(200_000))).toBe(200_000);
  });
});

describe("what differs between two definitions", () => {
  it("is told by path, entries matched by their key, so that one more does not shift the rest", () => {
    const other = changed((copy) => {
      const settings = copy["settings"] as { key: string; label: string }[];
      settings.splice(2, 0, { key: "native.gamma", label: "Gamma" });
      Object.assign(copy["pace"] as object, { inFlight: 1 });
      const name = settings.find(({ key }) => key === "slots[*].name");
      if (name) name.label = "Title";
    });
    const { changes, more } = diffDefinitions(lf8.definition, other);
    expect(more).toBe(false);
    expect(changes).toEqual(expect.arrayContaining([
      { path: "pace.inFlight", left: 4, right: 1 },
      { path: "settings[slots[*].name].label", left: "Name", right: "Title" },
      { path: "settings[native.gamma]", left: null, right: { key: "native.gamma", label: "Gamma" } },
    ]));
    expect(changes).toHaveLength(3);
    expect(diffDefinitions(lf8.definition, JSON.parse(text))).toEqual({ changes: [], more: false });
  });

  it("ends at its bound", () => {
    const list = (value: number) => ({ many: Array.from({ length: 2000 }, (_, index) => ({ key: `k${index}`, value })) });
    expect(diffDefinitions(list(1), list(2))).toMatchObject({ more: true, changes: { length: MAX_DEFINITION_CHANGES } });
  });
});

describe("what a new version reads differently", () => {
  const [old] = smallDrivers;
  if (!old) throw new Error("three drivers are shipped");
  const next = (edit: (text: string) => string) => compiled(driverDefinitionSchema.parse(JSON.parse(edit(JSON.stringify(old)))));
  const was = compiled(old);

  it("is nothing between equal versions", () => {
    expect(readDifferently(was, compiled(old), { "slots[1].placement.widthPct": 960 })).toEqual([]);
  });

  it("is another meaning, a range that no longer holds the value, another way on the wire, and what comes and goes", () => {
    const scaled = next((json) => json.replace('"max":1200,"step":4,"scale":0.1', '"max":940,"step":4,"scale":0.2').replace('"initial":960', '"initial":940').replaceAll("TRIM:LEFT", "TRIM:L").replaceAll("native.fanPct", "native.fanShare"));
    const found = readDifferently(was, scaled, { "slots[1].placement.widthPct": 960, "native.fanPct": 40 });
    expect(found).toEqual(expect.arrayContaining([
      expect.objectContaining({ key: "slots[1].placement.widthPct", kind: "meaning", left: 96, right: 192 }),
      expect.objectContaining({ key: "slots[1].placement.widthPct", kind: "range", left: 960 }),
      expect.objectContaining({ key: "everywhere.trim.leftPx", kind: "wire" }),
      expect.objectContaining({ key: "native.fanPct", kind: "removed", left: 40 }),
      expect.objectContaining({ key: "native.fanShare", kind: "added" }),
    ]));
    expect(found.filter(({ kind }) => kind === "wire")).toHaveLength(1);
  });
});

describe("the live view of a driver's bytes", () => {
  // Source: the check figures of the bench drawing; CRC-16/XMODEM gives both.
  it("shows what a command puts on the line", () => {
    expect(commandBytes(lf8, { kind: "write", key: "slots[4].placement.offsetPx", value: 12 })).toMatchObject({ text: "SLOT4:HPOS 12*713F", replyBytes: 19 });
    expect(commandBytes(lf8, { kind: "read", key: "slots[4].placement.offsetPx" })).toMatchObject({ text: "SLOT4:HPOS?*0585" });
    expect(commandBytes(lf8, { kind: "status", name: "identity" })).toMatchObject({ hex: expect.stringMatching(/^2A 49 44 4E 3F/u) });
    expect(commandBytes(lf8, { kind: "read", key: "nothing" })).toBe("The driver has no way to read nothing.");
  });

  it.each(shippedDrivers.map((definition) => [definition.slug, compiled(definition)] as const))("makes bytes of every command of %s", (_slug, driver) => {
    const commands = commandsOf(driver);
    expect(new Set(commands.map((command) => JSON.stringify(command))).size).toBe(commands.length);
    const silent = commands.filter((command) => typeof commandBytes(driver, command) === "string");
    // A block that has settings that can't be written is not written at all.
    expect(silent).toEqual([]);
  });

  it("reads a pasted reply, as hex or as text, and says why one is none", () => {
    const command: Command = { kind: "read", key: "slots[4].placement.offsetPx" };
    const asked = commandBytes(lf8, command);
    if (typeof asked === "string") throw new Error(asked);
    const read = (pasted: string, as: "hex" | "text") => {
      const bytes = pastedBytes(pasted, as);
      if (typeof bytes === "string") throw new Error(bytes);
      return readReply(lf8, asked.request, bytes);
    };
    expect(read("SLOT4:HPOS=12*700D\\n", "text").values).toEqual({ "slots[4].placement.offsetPx": 12 });
    expect(read("53 4C 4F 54 34 3A 48 50 4F 53 3D 31 32 2A 37 30 30 44 0A", "hex").values).toEqual({ "slots[4].placement.offsetPx": 12 });
    expect(read("SLOT4:HPOS=13*700D\\n", "text").frames[0]?.match).toEqual({ kind: "noise", why: "its check is wrong" });
    expect(read("SLOT4:HPOS=12*700D", "text").frames[0]?.match).toEqual({ kind: "noise", why: "it ends in the middle" });
    expect(read("SLOT4:HPOS!-222 Data out of range*0000\\n", "text").frames[0]?.match).toMatchObject({ kind: "noise" });
    expect(pastedBytes("5", "hex")).toBe("The last pair has one digit.");
    expect(pastedBytes("zz", "hex")).toMatch(/not hex/u);
    expect(pastedBytes("0x41, 0x42", "hex")).toEqual(Uint8Array.from([0x41, 0x42]));
    expect(pastedBytes("a\\x00\\\\", "text")).toEqual(Uint8Array.from([0x61, 0, 92]));
  });
});
