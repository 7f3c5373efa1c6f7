import type { PathMessage } from "@/lib/result";
import { CONFORMANCE_BOUNDS } from "@/lib/serial/conformance/bounds";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";
import type { Recording } from "@/lib/serial/recording";
import { compareRecording } from "@/lib/serial/replay/compare-recording";
import type { RecordingComparison } from "@/lib/serial/replay/compare-recording";

/** A recording against a driver version, or why that version says nothing. */
export type ShownComparison =
  | { readonly kind: "no-driver"; readonly problems: readonly PathMessage[] }
  | { readonly kind: "compared"; readonly result: RecordingComparison; /** Lines past the bound. */ readonly leftOut: number };

/**
 * Compares in the page as the suite does at the server.
 * Bound: the first `CONFORMANCE_BOUNDS.recordingLines` lines, so that a long recording does not hold the page.
 */
export function comparisonOf(definition: unknown, recording: Recording): ShownComparison {
  const parsed = parseDefinition(definition);
  if (!parsed.ok) return { kind: "no-driver", problems: parsed.error };
  const looked = recording.lines.slice(0, CONFORMANCE_BOUNDS.recordingLines);
  const result = compareRecording(parsed.value.driver, { ...recording, lines: looked });
  return { kind: "compared", result, leftOut: recording.lines.length - looked.length };
}

/** Lines of the file in which the driver differs. */
export function markedLines(compared: ShownComparison): readonly number[] {
  return compared.kind === "compared" ? compared.result.differences.map(({ line }) => line) : [];
}

/** `48, “H”`; a byte without a glyph as hex alone; "nothing" where it has ended. */
export function byteWords(byte: number | null): string {
  if (byte === null) return "nothing";
  const hex = byte.toString(16).toUpperCase().padStart(2, "0");
  return byte > 32 && byte < 127 ? `${hex}, “${String.fromCharCode(byte)}”` : hex;
}
