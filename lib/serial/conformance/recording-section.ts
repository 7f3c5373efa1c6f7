import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { Recording } from "@/lib/serial/recording";
import { compareRecording } from "@/lib/serial/replay/compare-recording";
import { playThrough } from "@/lib/serial/replay/play-through";
import type { Section } from "./section";
import type { Surroundings } from "./test-bench";

export type NamedRecording = { readonly name: string; readonly recording: Recording };

const bytesOf = ({ lines }: Recording) => lines.reduce((sum, line) => sum + (line.direction === "event" ? 0 : line.bytes.length), 0);

async function judgeRecording({ driver, bounds, budget }: Surroundings, section: Section, { name, recording }: NamedRecording): Promise<void> {
  if (recording.lines.length > bounds.recordingLines) section.note(`“${name}”: the first ${bounds.recordingLines} lines were looked at.`);
  const looked: Recording = { ...recording, lines: recording.lines.slice(0, bounds.recordingLines) };
  const compared = compareRecording(driver, looked);
  budget.spend(compared.exchanges.length, bytesOf(looked));
  const [says, reads] = [compared.differences.find(({ kind }) => kind === "says"), compared.differences.find(({ kind }) => kind === "reads")];
  const where = says && `Line ${says.line}, byte ${says.offset}: recorded ${hex(says.expected)}, the driver says ${hex(says.got)}. ${says.message}`;
  section.judge(`“${name}”: the driver says what was said`, compared.exchanges.length === 0 ? "There is no request in it." : (where ?? null));
  section.judge(`“${name}”: the driver reads what was answered`, reads ? `Line ${reads.line}: ${reads.message}` : null);
  if (compared.unanswered > 0 && compared.differences.length === 0) section.note(`“${name}”: ${compared.unanswered} requests have no answer, so it was not played through a session.`);
  if (compared.differences.length > 0 || compared.unanswered > 0) return;
  await section.attempt(`“${name}”: a session plays it through`, async () => {
    const clock = createVirtualClock();
    const played = await clock.run(playThrough(driver, looked, compared, clock), { limitMs: bounds.stepVirtualMs * 24 });
    budget.spend(compared.exchanges.length, bytesOf(looked));
    if (played.kind === "differs") return `Line ${played.difference.line}, byte ${played.difference.offset}: expected ${hex(played.difference.expected)}, got ${hex(played.difference.got)}.`;
    return played.kind === "stopped" ? `Exchange ${played.exchange}: ${played.message}` : null;
  });
}

const hex = (byte: number | null) => (byte === null ? "nothing" : byte.toString(16).toUpperCase().padStart(2, "0"));

/** Each recording: what the driver says, what it reads, and the whole of it through a session's own line and queue. */
export async function judgeRecordings(around: Surroundings, section: Section, recordings: readonly NamedRecording[]): Promise<void> {
  if (recordings.length === 0) section.note("There is no recording, so nothing here speaks for hardware.");
  if (recordings.length > around.bounds.recordings) section.note(`Of ${recordings.length} recordings the first ${around.bounds.recordings} were looked at.`);
  for (const one of recordings.slice(0, around.bounds.recordings)) await judgeRecording(around, section, one);
}
