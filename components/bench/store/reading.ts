import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { TakenBackup } from "@/lib/serial/backup/types";
import { compareDocuments } from "@/lib/profile/compare";
import { say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { replan } from "@/components/bench/store/review";
import type { Activity, BenchBackup } from "@/components/bench/store/types";
import type { BackupView } from "@/lib/contracts/backup";

/** Progress is drawn at most this often. */
const DRAW_MS = 100;

/** Reads the whole device once and shows it. Null: it was stopped, or the link is gone. */
async function readWhole(core: BenchCore, activity: Activity): Promise<TakenBackup | null> {
  const { line, store } = core;
  if (!line) return null;
  const abort = new AbortController();
  core.abort = abort;
  let drawnMs = 0;
  store.setState({ activity });
  const taken = await takeBackup(line.session, line.driver, {
    signal: abort.signal,
    onProgress: (progress) => {
      // A reply comes every 2 ms; drawing each would keep the page from hearing the next.
      const nowMs = core.around.clock.nowMs();
      if (nowMs < drawnMs + DRAW_MS && progress.done > 0) return;
      drawnMs = nowMs;
      store.setState({ progress });
    },
  });
  const arriving = taken.ok ? await line.session.arriving(abort.signal) : null;
  core.abort = null;
  store.setState({ progress: null, activity: "idle" });
  if (!taken.ok) {
    if (taken.error.code !== "aborted") say(core, "halt", `The device was not read: ${taken.error.message}`);
    return null;
  }
  const { content, activeSlot, rasterOut } = taken.value;
  store.setState({ reading: { content, activeSlot, rasterOut, arriving: arriving?.ok ? arriving.value : null, atMs: core.around.clock.wallMs() } });
  replan(core);
  return taken.value;
}

export async function readDevice(core: BenchCore): Promise<boolean> {
  return (await readWhole(core, "reading")) !== null;
}

async function storeBackup(core: BenchCore, taken: TakenBackup, cause: "by-hand" | "before-run" | "after-run"): Promise<BackupView | null> {
  const stored = core.store.getState().device?.stored;
  if (!stored) return null;
  const { content, identity, activeSlot, arriving, rasterOut } = taken;
  return core.around.server.storeBackup(stored.id, {
    cause, takenAt: new Date(core.around.clock.wallMs()).toISOString(), firmware: identity.firmware, activeSlot, arriving, rasterOut,
    content: { driver: content.driver, values: content.values, unreadable: [...content.unreadable] },
  });
}

/**
 * Reads everything and stores it: on the server where somebody is signed in, else in this page.
 *
 * @returns null when nothing was stored; the notice says why
 */
export async function backUp(core: BenchCore, cause: "by-hand" | "before-run" | "after-run"): Promise<BenchBackup | null> {
  const taken = await readWhole(core, "backing-up");
  if (!taken) return null;
  const before = core.store.getState().backup;
  try {
    const row = await storeBackup(core, taken, cause);
    const changedHere = before ? compareDocuments(before.content.document, taken.content.document).length : null;
    const backup: BenchBackup = {
      id: row?.id ?? null, takenAt: core.around.clock.wallMs(), content: taken.content, changedCount: row ? row.changedValues : changedHere,
    };
    core.store.setState({ backup });
    return backup;
  } catch (error) {
    say(core, "halt", `The backup was read but not stored: ${sentenceOf(error)} Nothing is written without one; try again.`);
    return null;
  }
}
