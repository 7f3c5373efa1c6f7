import "server-only";
import type { Db } from "@/db/client";
import type { Maintaining } from "@/db/queries/askers";
import { readDefinition, type VersionKey } from "@/db/queries/drivers";
import { recordingsForDriver } from "@/db/queries/recordings";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { createRealClock } from "@/lib/serial/clock/real-clock";
import { CONFORMANCE_BOUNDS } from "@/lib/serial/conformance/bounds";
import type { ConformanceReport } from "@/lib/serial/conformance/report";
import { runConformance } from "@/lib/serial/conformance/run-conformance";
import { parseRecording } from "@/lib/serial/recording";

/** Suites that one process runs at once: each takes a processor for some seconds. Another asker is told to come back. */
const MAX_RUNNING = 1;
let running = 0;

/**
 * Computes a report here, of the definition and the recordings as they are stored: nothing of it comes from the caller.
 *
 * The suite is bounded and yields between its steps, so that this process goes on answering.
 * Errors: "absent"; "busy" while another suite runs.
 */
export async function computeReport(
  db: Db,
  by: Maintaining,
  key: VersionKey,
): Promise<Result<ConformanceReport, "absent" | "busy">> {
  const stored = await readDefinition(db, by, key);
  if (!stored.ok) return stored;
  if (running >= MAX_RUNNING) return fail("busy");
  running += 1;
  try {
    const files = await recordingsForDriver(db, by, key.slug, CONFORMANCE_BOUNDS.recordings);
    const recordings = files.flatMap(({ name, content }) => {
      const parsed = parseRecording(content);
      return parsed.ok ? [{ name, recording: parsed.value }] : [];
    });
    return ok(await runConformance(stored.value.definition, { recordings, clock: createRealClock() }));
  } finally {
    running -= 1;
  }
}
