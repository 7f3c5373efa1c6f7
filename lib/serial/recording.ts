import { z } from "zod";
import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledDriver } from "./driver/compiled";
import { hexOf, type WireEntry } from "./wire-log";

/** A recording is JSON Lines: a head, then one line for each thing that went over the wire or happened. */
export const RECORDING_FORMAT = "backporch-recording";
/** Limits of a recording from a stranger. Source: the project's own rule. */
export const MAX_RECORDING_BYTES = 16 * 1024 * 1024;
export const MAX_RECORDING_LINES = 100_000;

const headSchema = z.strictObject({
  format: z.literal(RECORDING_FORMAT), version: z.literal(1),
  driver: z.strictObject({ slug: z.string().max(64), version: z.string().max(16) }),
  /** When the first line happened, as ISO 8601 in UTC. */
  startedAt: z.string().max(40),
  /** Names and serial numbers were replaced by as many `x`. */
  struckOut: z.boolean(),
});
const bytesSchema = z.strictObject({
  /** From the first line, in ms. */
  atMs: z.number().min(0), direction: z.enum(["out", "in"]), hex: z.string().max(4096).regex(/^(?:[0-9A-F]{2}(?: [0-9A-F]{2})*)?$/u),
});
const eventSchema = z.strictObject({ atMs: z.number().min(0), direction: z.literal("event"), text: z.string().max(500) });
const lineSchema = z.discriminatedUnion("direction", [bytesSchema, eventSchema]);

export type RecordingHead = z.infer<typeof headSchema>;
export type RecordingLine =
  | { readonly atMs: number; readonly direction: "out" | "in"; readonly bytes: Uint8Array }
  | { readonly atMs: number; readonly direction: "event"; readonly text: string };
export type Recording = { readonly head: RecordingHead; readonly lines: readonly RecordingLine[] };

const rounded = (ms: number) => Math.round(ms * 1000) / 1000;

/** What an event's sentence says between quotes may be a name. */
export const strikeOutEvent = (text: string): string => text.replace(/“[^”]*”/gu, "“…”");

/** The text of a recording, as `parseRecording` reads it. */
export function recordingText({ head, lines }: Recording): string {
  const shown = lines.map((line) => (line.direction === "event" ? line : { atMs: line.atMs, direction: line.direction, hex: hexOf(line.bytes) }));
  return [head, ...shown].map((line) => `${JSON.stringify(line)}\n`).join("");
}

/**
 * Text of a recording made from the wire log.
 * @param options.strikeOut takes names and serial numbers out, of events altogether what is between quotes
 */
export function saveRecording(driver: CompiledDriver, entries: readonly WireEntry[], options: { readonly strikeOut: boolean }): string {
  const { slug, version } = driver.definition;
  const [first] = entries;
  const head: RecordingHead = { format: RECORDING_FORMAT, version: 1, driver: { slug, version }, startedAt: new Date(first?.wallMs ?? 0).toISOString(), struckOut: options.strikeOut };
  const requests = new Map(entries.filter((entry) => entry.direction === "out").map((entry) => [entry.number, entry.bytes]));
  const lines = entries.map((entry): RecordingLine => {
    const atMs = rounded(entry.atMs - (first?.atMs ?? 0));
    if (entry.direction === "event") return { atMs, direction: entry.direction, text: options.strikeOut ? strikeOutEvent(entry.text) : entry.text };
    const request = entry.exchange === undefined ? undefined : requests.get(entry.exchange);
    return { atMs, direction: entry.direction, bytes: options.strikeOut ? driver.codec.strikeOut(entry.bytes, request) : entry.bytes };
  });
  return recordingText({ head, lines });
}

const bytesOf = (hex: string) => Uint8Array.from(hex === "" ? [] : hex.split(" "), (pair) => Number.parseInt(pair, 16));

function parseLine(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

/**
 * Reads a recording. Bounded by `MAX_RECORDING_BYTES` and `MAX_RECORDING_LINES`.
 * Errors: line number (as path) and sentence, the first hundred.
 */
export function parseRecording(text: string): Result<Recording, PathMessage[]> {
  if (text.length > MAX_RECORDING_BYTES) return fail([{ path: "", message: "is longer than 16 MiB" }]);
  const [headText, ...rest] = text.split("\n", MAX_RECORDING_LINES + 2).filter((line) => line.trim() !== "");
  const head = headSchema.safeParse(parseLine(headText ?? ""));
  if (!head.success) return fail([{ path: "1", message: "is not the head of a recording, version 1" }]);
  if (rest.length > MAX_RECORDING_LINES) return fail([{ path: "", message: `has more than ${MAX_RECORDING_LINES} lines` }]);
  const problems: PathMessage[] = [];
  const lines: RecordingLine[] = [];
  for (const [index, lineText] of rest.entries()) {
    const line = lineSchema.safeParse(parseLine(lineText));
    if (!line.success) problems.push({ path: String(index + 2), message: line.error.issues[0]?.message ?? "is no line of a recording" });
    else if (line.data.direction === "event") lines.push(line.data);
    else lines.push({ atMs: line.data.atMs, direction: line.data.direction, bytes: bytesOf(line.data.hex) });
    if (problems.length === 100) break;
  }
  return problems.length > 0 ? fail(problems) : ok({ head: head.data, lines });
}
