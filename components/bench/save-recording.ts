import { saveRecording } from "@/lib/serial/recording";
import { say, type BenchCore } from "@/components/bench/store/bench-core";

/** Hands the wire log to the browser as a file (JSON Lines). */
export function downloadRecording(core: BenchCore, strikeOut: boolean): void {
  if (!core.line) return say(core, "halt", "Connect a device first: a recording names its driver.");
  const { driver } = core.line;
  const text = saveRecording(driver, core.wireLog.entries(), { strikeOut });
  const url = URL.createObjectURL(new Blob([text], { type: "application/jsonl" }));
  const link = document.createElement("a");
  link.href = url;
  link.download = `${driver.definition.slug}.porch-recording.jsonl`;
  link.click();
  URL.revokeObjectURL(url);
}
