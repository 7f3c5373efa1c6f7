import { formatCount } from "@/components/ui/figures";
import { recordingBytes } from "@/lib/contracts/recording";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";
import { parseRecording } from "@/lib/serial/recording";
import type { Recording } from "@/lib/serial/recording";

/** A file that was chosen or dropped, as the page read it. Paths of complaints are line numbers. */
export type ChosenFile = {
  readonly fileName: string;
  readonly text: string;
  readonly read: Result<Recording, readonly PathMessage[]>;
};

const whole = (message: string): readonly PathMessage[] => [{ path: "", message }];

/**
 * Reads a file as a recording, as the server will read it.
 * Errors: what is wrong, by line.
 */
export function readChosen(fileName: string, bytes: Uint8Array): ChosenFile {
  if (bytes.length > recordingBytes) {
    const most = formatCount(recordingBytes / 1024 / 1024, "MiB", "MiB");
    return { fileName, text: "", read: fail(whole(`It has ${formatCount(bytes.length, "byte", "bytes")}; ${most} is the most.`)) };
  }
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return { fileName, text: "", read: fail(whole("It is not UTF-8 text.")) };
  }
  const parsed = parseRecording(text);
  if (!parsed.ok) return { fileName, text, read: parsed };
  return parsed.value.lines.length === 0
    ? { fileName, text, read: fail(whole("There is no line in it after the head.")) }
    : { fileName, text, read: ok(parsed.value) };
}

/** A name for a recording from its file's: without the ending, no longer than a name may be. */
export function nameOfFile(fileName: string): string {
  const MAX_NAME = 120;
  return fileName.replace(/(?:\.porch-recording)?\.(?:jsonl|ndjson|json|txt)$/iu, "").replace(/\p{Cc}/gu, " ").trim().slice(0, MAX_NAME);
}
