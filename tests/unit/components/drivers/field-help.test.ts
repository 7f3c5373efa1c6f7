import { describe, expect, it } from "vitest";
import { z } from "zod";
import { FIELD_HELP, helpFor } from "@/components/drivers/editor/field-help";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";

type Schema = {
  readonly properties?: Readonly<Record<string, Schema>>;
  readonly additionalProperties?: Schema | boolean;
  readonly items?: Schema | boolean;
  readonly anyOf?: readonly Schema[];
  readonly oneOf?: readonly Schema[];
  readonly $ref?: string;
};

// The schema itself is what the table is held against: zod writes it out as JSON Schema.
const whole = z.toJSONSchema(driverDefinitionSchema, { io: "input", unrepresentable: "any" }) as Schema & { readonly $defs?: Record<string, Schema> };

/** Every field that the schema has, as the table writes paths. */
function fieldsOf(schema: Schema, path: string): string[] {
  if (schema.$ref !== undefined) return fieldsOf(whole.$defs?.[schema.$ref.split("/").at(-1) ?? ""] ?? {}, path);
  const choices = [...(schema.anyOf ?? []), ...(schema.oneOf ?? [])].flatMap((one) => fieldsOf(one, path));
  const own = Object.entries(schema.properties ?? {}).flatMap(([name, inner]) => {
    const field = path === "" ? name : `${path}.${name}`;
    return [field, ...fieldsOf(inner, field)];
  });
  const entries = typeof schema.items === "object" ? fieldsOf(schema.items, `${path}[]`) : [];
  // A group with fields of its own that keeps others too has no names to explain.
  const isOpen = schema.properties === undefined && typeof schema.additionalProperties === "object";
  const named = isOpen && typeof schema.additionalProperties === "object" ? [`${path}.*`, ...fieldsOf(schema.additionalProperties, `${path}.*`)] : [];
  return [...choices, ...own, ...entries, ...named];
}

const fields = [...new Set(fieldsOf(whole, ""))];

describe("help for the fields of a driver definition", () => {
  it("explains every field that the schema has", () => {
    expect(fields.length).toBeGreaterThan(100);
    const explained = new Set(FIELD_HELP.map(({ path }) => path));
    expect(fields.filter((field) => !explained.has(field))).toEqual([]);
  });

  it("explains no field that the schema does not have, and none twice", () => {
    const known = new Set(fields);
    expect(FIELD_HELP.map(({ path }) => path).filter((path) => !known.has(path))).toEqual([]);
    expect(new Set(FIELD_HELP.map(({ path }) => path)).size).toBe(FIELD_HELP.length);
  });

  it("says something of each", () => {
    expect(FIELD_HELP.filter(({ words }) => words.trim() === "")).toEqual([]);
  });

  it("finds the field of a place in the text, or the nearest around it", () => {
    expect(helpFor("settings[12].wire.read.reply")?.path).toBe("settings[].wire.read.reply");
    expect(helpFor("status.identity.request")?.path).toBe("status.*.request");
    expect(helpFor("factory.slots[1].name")?.path).toBe("factory.*");
    expect(helpFor("transport.nothing")?.path).toBe("transport");
    expect(helpFor("")).toBeNull();
  });
});
