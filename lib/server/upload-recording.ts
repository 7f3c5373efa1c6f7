import "server-only";
import type { Db } from "@/db/client";
import type { Maintaining } from "@/db/queries/askers";
import type { RecordingValues } from "@/db/queries/recordings";
import { driverSlug, driverVersionNumber } from "@/lib/contracts/driver";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";
import { parseRecording, recordingText } from "@/lib/serial/recording";
import { strikeOutRecording } from "@/lib/serial/replay/strike-out-recording";
import { findDriver } from "@/lib/server/drivers";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";

type Refused = { readonly code: "not-a-recording"; readonly errors: readonly PathMessage[] };

const timeOf = (text: string): Date | null => {
  const ms = Date.parse(text);
  return Number.isNaN(ms) ? null : new Date(ms);
};

/**
 * A recording as it is stored: read, struck out where that is asked for, and written again in the program's own form.
 * Errors: "not-a-recording" with lines; "no-driver" when it is to be struck out and was made with a version that is not here.
 */
export async function readUpload(
  db: Db,
  asker: Maintaining,
  bytes: Uint8Array,
  { strikeOut }: { readonly strikeOut: boolean },
): Promise<Result<Omit<RecordingValues, "name" | "deviceId">, Refused | "no-driver">> {
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return fail({ code: "not-a-recording", errors: [{ path: "", message: "The file is not UTF-8." }] });
  }
  const parsed = parseRecording(text);
  if (!parsed.ok) return fail({ code: "not-a-recording", errors: parsed.error });
  const { driver } = parsed.value.head;
  if (!driverSlug.safeParse(driver.slug).success || !driverVersionNumber.safeParse(driver.version).success) {
    return fail({
      code: "not-a-recording",
      errors: [{ path: "1", message: "Does not name a driver and its version." }],
    });
  }
  let kept = parsed.value;
  if (strikeOut && !kept.head.struckOut) {
    const definition = await findDriver(db, driver, asker);
    if (!definition.ok) return definition;
    kept = strikeOutRecording(compiledDriver(definition.value), kept);
  }
  const content = recordingText(kept);
  return ok({
    driver,
    startedAt: timeOf(kept.head.startedAt),
    struckOut: kept.head.struckOut,
    exchanges: kept.lines.filter(({ direction }) => direction === "out").length,
    lines: kept.lines.length,
    content,
  });
}
