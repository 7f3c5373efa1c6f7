import type { ListenLine } from "@/components/recordings/listen/listen-core";
import { RECORDING_FORMAT, recordingText, saveRecording } from "@/lib/serial/recording";
import type { Recording, RecordingLine } from "@/lib/serial/recording";
import type { WireEntry } from "@/lib/serial/wire-log";

/** The driver that a recording without one names: none that exists, until somebody writes it. */
const NO_DRIVER_VERSION = "0.0.0";

/** What was heard, in the form of a recording. @param slug what a device without a driver is called */
export function heardRecording(entries: readonly WireEntry[], line: ListenLine | null, slug: string): Recording {
  const [first] = entries;
  const driver = line?.kind === "driver" ? line.driver.definition : { slug, version: NO_DRIVER_VERSION };
  const lines = entries.map((entry): RecordingLine => {
    const atMs = Math.round((entry.atMs - (first?.atMs ?? 0)) * 1000) / 1000;
    if (entry.direction === "event") return { atMs, direction: "event", text: entry.text };
    return { atMs, direction: entry.direction, bytes: entry.bytes };
  });
  const head = {
    format: RECORDING_FORMAT,
    version: 1,
    driver: { slug: driver.slug, version: driver.version },
    startedAt: new Date(first?.wallMs ?? 0).toISOString(),
    struckOut: false,
  } as const;
  return { head, lines };
}

/** The file of what was heard. Without a driver nobody knows where a name stands, so nothing can be struck out. */
export function heardText(entries: readonly WireEntry[], line: ListenLine | null, { slug, strikeOut }: { readonly slug: string; readonly strikeOut: boolean }): string {
  if (line?.kind === "driver") return saveRecording(line.driver, entries, { strikeOut });
  return recordingText(heardRecording(entries, line, slug));
}
