import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { strikeOutEvent, type Recording, type RecordingLine } from "@/lib/serial/recording";

/**
 * Takes names and serial numbers out of a recording, as saving one can do. What no request stands before is crossed out whole.
 * @param driver the one that the recording was made with
 */
export function strikeOutRecording(driver: CompiledDriver, recording: Recording): Recording {
  let request: Uint8Array | undefined;
  const lines = recording.lines.map((line): RecordingLine => {
    if (line.direction === "event") return { ...line, text: strikeOutEvent(line.text) };
    if (line.direction === "out") request = line.bytes;
    return { ...line, bytes: driver.codec.strikeOut(line.bytes, line.direction === "in" ? request : undefined) };
  });
  return { head: { ...recording.head, struckOut: true }, lines };
}
