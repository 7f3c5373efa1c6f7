import crc16xmodem from "crc/crc16xmodem";
import { describe, expect, it } from "vitest";
import { commandRows, frameWords, MAX_SHOWN, readPasted, valueProblem, withValue } from "@/components/drivers/editor/live-view";
import { commandBytes } from "@/lib/serial/driver/command-words";
import type { Command } from "@/lib/serial/driver/command-words";
import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { compiled, lf8 } from "@/tests/unit/serial/simulated-rig";

/** A line with its check field, by the npm package crc: CRC-16/XMODEM over the text before the asterisk. */
const line = (text: string) => `${text}*${crc16xmodem(Buffer.from(text)).toString(16).toUpperCase().padStart(4, "0")}`;

const read = (key: string): Command => ({ kind: "read", key });
const bytesOf = (command: Command) => {
  const made = commandBytes(lf8, command);
  if (typeof made === "string") throw new Error(made);
  return made;
};

describe("live view of a driver", () => {
  it("shows the bytes of a command, and other ones for another value", () => {
    const write: Command = { kind: "write", key: "slots[1].placement.offsetPx", value: 0 };
    expect(bytesOf(write).text).toBe(line("SLOT1:HPOS 0"));
    expect(bytesOf(withValue(write, "-12")).text).toBe(line("SLOT1:HPOS -12"));
  });

  it("says of a value that the setting cannot hold that no run sends it", () => {
    const write: Command = { kind: "write", key: "slots[1].placement.offsetPx", value: 63 };
    expect(valueProblem(lf8, write)).toBeNull();
    expect(valueProblem(lf8, withValue(write, "64"))).toBe("No run sends this: 64 is outside -64 to 63.");
    expect(valueProblem(lf8, withValue(write, "left"))).toBe("No run sends this: it is not a whole number.");
    expect(valueProblem(lf8, read("slots[1].name"))).toBeNull();
  });

  it("puts a typed number into an order", () => {
    const recall: Command = { kind: "action", name: "recall", fields: { slot: 1 } };
    expect(bytesOf(withValue(recall, "7")).text).toBe(line("*RCL 7"));
  });

  it("reads a pasted reply, with the line end that a text lacks", () => {
    const reply = readPasted(lf8, bytesOf(read("slots[1].placement.offsetPx")), line("SLOT1:HPOS=-3"), "text");
    if (typeof reply === "string") throw new Error(reply);
    expect(reply.values).toEqual({ "slots[1].placement.offsetPx": -3 });
    expect(reply.frames.map(frameWords)).toEqual(["This is the answer."]);
  });

  it("says why a pasted reply is none", () => {
    const made = bytesOf(read("slots[1].placement.offsetPx"));
    const words = (pasted: string) => {
      const reply = readPasted(lf8, made, pasted, "text");
      return typeof reply === "string" ? reply : reply.frames.map(frameWords).join(" ");
    };
    expect(words(line("SLOT1:HPOS=-3").replace("-3", "-4"))).toContain("its check is wrong");
    expect(words("SLOT1:HPOS=-3")).toContain("it has no check");
    expect(words(line("SLOT2:HPOS=-3"))).toBe("It answers something else.");
    expect(readPasted(lf8, made, "4G", "hex")).toContain("not hex");
  });

  it("shows hex as the specification of the Modbus serial line orders it: address, function, data, CRC low byte first", () => {
    const driver = compiled(brackenrow4r);
    const { rows } = commandRows(driver, "read brightness");
    const made = rows[0]?.made;
    if (made === undefined || typeof made === "string") throw new Error("no bytes");
    expect(made.hex).toMatch(/^[0-9A-F]{2} 03 (?:[0-9A-F]{2} ){4}[0-9A-F]{2} [0-9A-F]{2}$/u);
  });

  it("finds commands by all words of the filter, and bounds what is shown", () => {
    expect(commandRows(lf8, "write offsetpx").rows.map(({ id }) => id)).toEqual(["write slots[1].placement.offsetPx"]);
    expect(commandRows(lf8, "nothing of the kind").total).toBe(0);
    expect(commandRows(lf8, "").rows.length).toBeLessThanOrEqual(MAX_SHOWN);
  });
});
