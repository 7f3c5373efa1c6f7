import { describe, expect, it } from "vitest";
import { nameOfFile, readChosen } from "@/components/recordings/chosen-file";
import { recordingBytes } from "@/lib/contracts/recording";

const bytes = (text: string) => new TextEncoder().encode(text);
const head = '{"format":"backporch-recording","version":1,"driver":{"slug":"a-b","version":"1.0.0"},"startedAt":"2026-10-02T18:40:00.000Z","struckOut":true}';
const sent = '{"atMs":0,"direction":"out","hex":"2A 49"}';
const problems = (text: string) => {
  const { read } = readChosen("x.jsonl", bytes(text));
  return read.ok ? [] : read.error;
};

describe("a recording that is chosen or dropped", () => {
  it("is read as the server reads it", () => {
    const { read } = readChosen("x.jsonl", bytes(`${head}\n${sent}\n`));
    expect(read.ok && read.value.lines).toEqual([{ atMs: 0, direction: "out", bytes: Uint8Array.of(0x2a, 0x49) }]);
  });

  it("names the line that is wrong", () => {
    expect(problems(`${head}\n${sent}\n{"atMs":1,"direction":"sideways"}\n`).map(({ path }) => path)).toEqual(["3"]);
    expect(problems(`nothing\n${sent}\n`).map(({ path }) => path)).toEqual(["1"]);
  });

  it("says of a file that is no text, too long or empty what it is", () => {
    const refused = (file: Uint8Array) => {
      const { read } = readChosen("x", file);
      return read.ok ? "" : (read.error[0]?.message ?? "");
    };
    expect(refused(Uint8Array.of(0xff, 0xfe, 0x00))).toContain("not UTF-8");
    expect(refused(new Uint8Array(recordingBytes + 1))).toContain("MiB is the most");
    expect(refused(bytes(head))).toContain("no line");
  });

  it("takes its name from the file, without the ending", () => {
    expect(nameOfFile("cabinet a.porch-recording.jsonl")).toBe("cabinet a");
    expect(nameOfFile(`${"x".repeat(300)}.jsonl`)).toHaveLength(120);
  });
});
