import { createHash } from "node:crypto";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { canonicalJson, hashDocument } from "@/lib/profile/canonical";
import { sha256Hex } from "@/lib/profile/sha256";
import { oneSlot } from "./samples";

const bytes = (text: string) => new TextEncoder().encode(text);

/** RFC 8785, appendix B: IEEE 754 doubles in hex, and their JSON. */
const rfcNumbers = [
  ["0000000000000000", "0"],
  ["8000000000000000", "0"],
  ["0000000000000001", "5e-324"],
  ["8000000000000001", "-5e-324"],
  ["7fefffffffffffff", "1.7976931348623157e+308"],
  ["ffefffffffffffff", "-1.7976931348623157e+308"],
  ["4340000000000000", "9007199254740992"],
  ["c340000000000000", "-9007199254740992"],
  ["4430000000000000", "295147905179352830000"],
  ["44b52d02c7e14af5", "9.999999999999997e+22"],
  ["44b52d02c7e14af6", "1e+23"],
  ["44b52d02c7e14af7", "1.0000000000000001e+23"],
  ["444b1ae4d6e2ef4e", "999999999999999700000"],
  ["444b1ae4d6e2ef4f", "999999999999999900000"],
  ["444b1ae4d6e2ef50", "1e+21"],
  ["3eb0c6f7a0b5ed8c", "9.999999999999997e-7"],
  ["3eb0c6f7a0b5ed8d", "0.000001"],
  ["41b3de4355555553", "333333333.3333332"],
  ["41b3de4355555554", "333333333.33333325"],
  ["41b3de4355555555", "333333333.3333333"],
  ["41b3de4355555556", "333333333.3333334"],
  ["41b3de4355555557", "333333333.33333343"],
  ["becbf647612f3696", "-0.0000033333333333333333"],
  ["43143ff3c1cb0959", "1424953923781206.2"],
] as const;

describe("canonicalJson", () => {
  it.each(rfcNumbers)("writes the double %s as RFC 8785 appendix B does: %s", (hex, text) => {
    expect(canonicalJson(Buffer.from(hex, "hex").readDoubleBE())).toBe(text);
  });

  it("writes the sample of RFC 8785, section 3.2.2, as section 3.2.4 prints its bytes", () => {
    const sample = {
      numbers: [333333333.33333329, 1e30, 4.5, 2e-3, 0.000000000000000000000000001],
      string: "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
      literals: [null, true, false],
    };
    const printed =
      "7b226c69746572616c73223a5b6e756c6c2c747275652c66616c73655d2c226e756d62657273223a5b3333333333333333332e333333333333332c31652b33302c342e352c302e3030322c31652d32375d2c22737472696e67223a22e282ac245c75303030665c6e4127425c225c5c5c5c5c222f227d";
    expect(Buffer.from(bytes(canonicalJson(sample))).toString("hex")).toBe(printed);
  });

  it("sorts names by code unit as the sample of RFC 8785, section 3.2.3", () => {
    const sample = {
      "\u20ac": "Euro Sign",
      "\r": "Carriage Return",
      "\ufb33": "Hebrew Letter Dalet With Dagesh",
      "1": "One",
      "\ud83d\ude00": "Emoji: Grinning Face",
      "\u0080": "Control",
      "\u00f6": "Latin Small Letter O With Diaeresis",
    };
    const order = [...canonicalJson(sample).matchAll(/:"([^"]+)"/gu)].map((match) => match[1]);
    expect(order).toEqual([
      "Carriage Return",
      "One",
      "Control",
      "Latin Small Letter O With Diaeresis",
      "Euro Sign",
      "Emoji: Grinning Face",
      "Hebrew Letter Dalet With Dagesh",
    ]);
  });

  it("refuses what JSON cannot hold, half a surrogate pair among it (RFC 8785, sections 3.2.2.2 and 3.2.2.3)", () => {
    for (const value of [NaN, Infinity, "\ud800", { "\udead": 1 }])
      expect(() => canonicalJson(value)).toThrow(TypeError);
  });

  it("gives one text for equal values, and a text that reads back as the value", () => {
    fc.assert(
      fc.property(fc.jsonValue({ noUnicodeString: false }), (value) => {
        const wellFormed = JSON.stringify(value).isWellFormed();
        fc.pre(wellFormed && !/\\ud[89a-f]/u.test(JSON.stringify(value)));
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
    );
  });
});

describe("sha256Hex", () => {
  // FIPS 180-4's examples as NIST publishes them ("SHA256.pdf": one block, two blocks), and the empty message.
  it.each([
    ["abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"],
    [
      "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
      "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
    ],
    ["", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"],
  ])("hashes %s as the published example", (message, digest) => {
    expect(sha256Hex(bytes(message))).toBe(digest);
  });

  it("agrees with node:crypto for every length around the block's edges, and for any bytes", () => {
    const reference = (message: Uint8Array) => createHash("sha256").update(message).digest("hex");
    for (let length = 0; length <= 130; length += 1) {
      const message = new Uint8Array(length).fill(length);
      expect(sha256Hex(message)).toBe(reference(message));
    }
    fc.assert(fc.property(fc.uint8Array({ maxLength: 4096 }), (message) => sha256Hex(message) === reference(message)));
  });
});

describe("hashDocument", () => {
  const document = oneSlot({ name: "Cabinet A" });

  it("does not change with provenance or with the order of fields", () => {
    const { slots, modes, ...rest } = document;
    expect(hashDocument({ slots, modes, ...rest, provenance: { by: "Imke R.", at: "2026-03-01" } })).toBe(
      hashDocument(document),
    );
  });

  it("changes with any value", () => {
    expect(hashDocument(oneSlot({ name: "Cabinet B" }))).not.toBe(hashDocument(document));
  });

  it("is SHA-256 of the canonical text", () => {
    expect(hashDocument(document)).toBe(createHash("sha256").update(canonicalJson(document)).digest("hex"));
  });
});
